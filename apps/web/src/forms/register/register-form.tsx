"use client";

import type { CampaignDocument, Hypothesis } from "@weighhouse/campaign/document";
import { payloadSchemas, type HypothesisContent } from "@weighhouse/campaign/entries";
import { useRouter, useSearchParams } from "next/navigation";
import { useEffect, useMemo } from "react";
import { FormProvider } from "react-hook-form";
import { Button } from "@/look/button";
import { useTRPCClient } from "@/trpc/client";
import { problemsInCampaign } from "../check-in-campaign";
import { FormBody } from "../form-body";
import { DraftNote, FailureNote, SendRow } from "../form-frame";
import { formSchema } from "../form-schema";
import { useDraftForm } from "../use-draft-form";
import { useSending } from "../use-sending";
import {
  alignedPredictions,
  draftOfHypothesis,
  emptyHypothesisDraft,
  hypothesisContent,
  hypothesisField,
  type HypothesisDraft,
} from "./hypothesis-draft";
import type { Registrant } from "./registrant";
import { PredictionsStep } from "./predictions-step";
import { ReviewStep } from "./review-step";
import { StatementStep } from "./statement-step";
import { Steps, stepFrom, type Step } from "./steps";

/**
 * Puts a hypothesis on the record by steps, or a new version of one. The step stands in the
 * address, so that the browser's way back leads to the step before.
 */
export function RegisterForm(props: {
  document: CampaignDocument;
  registrant: Registrant;
  amending: Hypothesis | null;
}) {
  const { document, registrant, amending } = props;
  const { key } = document.campaign;
  const client = useTRPCClient();
  const router = useRouter();
  const step = stepFrom(useSearchParams().get("step"));
  const defaults = useMemo(
    () =>
      amending === null
        ? emptyHypothesisDraft(document, registrant.team)
        : draftOfHypothesis(document, amending),
    [document, registrant.team, amending],
  );
  const schema = useMemo(() => schemaIn(document, amending), [document, amending]);
  const { form, draft } = useDraftForm({
    name: amending === null ? `register:${key}` : `amend:${key}:${amending.key}`,
    defaults,
    schema,
  });
  const { submit, sending, failure } = useSending({
    form,
    draft,
    under: /^\/hypothes(is|es\/\d+)(?=\/|$)/,
    field: hypothesisField,
    send: (hypothesis: HypothesisContent) =>
      amending === null
        ? client.hypotheses.register.mutate({ key, hypothesis })
        : client.hypotheses.amend.mutate({ key, hypothesis }),
    done: (_answer, hypothesis) => {
      router.push(`/campaigns/${key}/hypotheses/${hypothesis.key}`);
      router.refresh();
    },
  });
  useEffect(() => {
    // A draft may be older than a quantity, and quantities are declared while somebody types.
    const predictions = form.getValues("predictions");
    const aligned = alignedPredictions(document, predictions);
    if (aligned !== predictions) form.setValue("predictions", aligned);
  }, [document, form]);
  const go = (next: Step) => {
    window.history.pushState(null, "", `?step=${next}`);
    window.scrollTo({ top: 0 });
  };
  const goOn = async (next: Step) => {
    const complete = await form.trigger(
      step === "statement" ? ["title", "key", "statement", "group", "weight"] : undefined,
      { shouldFocus: true },
    );
    if (complete) go(next);
  };
  return (
    <FormProvider {...form}>
      <form
        onSubmit={(event) => {
          event.preventDefault();
          if (step === "review") void submit(event);
          else void goOn(step === "statement" ? "predictions" : "review");
        }}
        noValidate
        aria-label="Register a hypothesis"
      >
        <FormBody busy={sending}>
          <DraftNote draft={draft} />
          <Steps current={step} go={go} />
          {step === "statement" ? (
            <StatementStep document={document} registrant={registrant} amending={amending !== null}>
              <Button kind="main" type="submit">
                Continue to predictions
              </Button>
            </StatementStep>
          ) : null}
          {step === "predictions" ? (
            <PredictionsStep document={document}>
              <Button kind="main" type="submit">
                Continue to review
              </Button>
              <Button onClick={() => go("statement")}>Back to the statement</Button>
            </PredictionsStep>
          ) : null}
          {step === "review" ? (
            <ReviewStep document={document} registrant={registrant} amending={amending} go={go}>
              <FailureNote failure={failure} />
              <SendRow
                sending={sending}
                label={amending === null ? "Register hypothesis" : "Register new version"}
              >
                <Button onClick={() => go("predictions")}>Back to predictions</Button>
              </SendRow>
            </ReviewStep>
          ) : null}
        </FormBody>
      </form>
    </FormProvider>
  );
}

function schemaIn(document: CampaignDocument, amending: Hypothesis | null) {
  return formSchema<HypothesisDraft, HypothesisContent>({
    schema: payloadSchemas["hypothesis.registered"],
    content: hypothesisContent,
    field: hypothesisField,
    further: (part) =>
      problemsInCampaign(document, { list: "hypotheses", part, replaces: amending?.key ?? null }),
  });
}
