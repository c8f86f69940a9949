"use client";

import type { CampaignDocument } from "@weighhouse/campaign/document";
import { payloadSchemas, type Payload } from "@weighhouse/campaign/entries";
import { useMemo } from "react";
import { useFormContext } from "react-hook-form";
import { TextArea } from "@/look/field";
import { useTRPCClient } from "@/trpc/client";
import { problemsInCampaign } from "../check-in-campaign";
import { MeasurandFields } from "../declare/measurand-form";
import {
  emptyMeasurand,
  measurandContent,
  measurandField,
  type MeasurandDraft,
} from "../declare/part-drafts";
import { PartForm } from "../declare/part-form";
import { formSchema } from "../form-schema";

interface ProposalDraft extends MeasurandDraft {
  reason: string;
}

/** A quantity that a team asks the coordinator to declare, as it should be declared. */
export function ProposalForm({ document }: { document: CampaignDocument }) {
  const client = useTRPCClient();
  const { key } = document.campaign;
  const defaults = useMemo(
    (): ProposalDraft => ({ ...emptyMeasurand(document), reason: "" }),
    [document],
  );
  const schema = useMemo(
    () =>
      formSchema<ProposalDraft, Payload<"measurand.proposed">>({
        schema: payloadSchemas["measurand.proposed"],
        content: (draft) => ({ measurand: measurandContent(draft), reason: draft.reason.trim() }),
        field: fieldOf,
        further: async (content) => {
          const { measurand: part } = content as { measurand: unknown };
          const problems = await problemsInCampaign(document, { list: "measurands", part });
          return problems.map((problem) => ({
            ...problem,
            pointer: `/measurand${problem.pointer}`,
          }));
        },
      }),
    [document],
  );
  return (
    <PartForm
      name={`propose:${key}`}
      label="Propose a quantity"
      button="Propose quantity"
      defaults={defaults}
      schema={schema}
      field={fieldOf}
      send={(proposal) => client.declare.proposeMeasurand.mutate({ key, ...proposal })}
      done={({ measurand }) =>
        `“${measurand.title}” is proposed. The coordinator declares it or says why not.`
      }
      leaveTo={() => `/campaigns/${key}/quantities`}
    >
      <MeasurandFields document={document} />
      <Why />
    </PartForm>
  );
}

function Why() {
  const { register, formState } = useFormContext<ProposalDraft>();
  return (
    <TextArea
      label="Why it should be measured"
      error={formState.errors.reason?.message}
      {...register("reason")}
    />
  );
}

function fieldOf(draft: ProposalDraft, path: readonly (string | number)[]): string {
  return path[0] === "measurand" ? measurandField(draft, path.slice(1)) : path.join(".");
}
