"use client";

import type { CampaignDocument, Hypothesis } from "@weighhouse/campaign/document";
import { predictionContentSchema, type PredictionContent } from "@weighhouse/campaign/entries";
import { time } from "@weighhouse/campaign/fields";
import { useMemo } from "react";
import { useFormContext, useWatch } from "react-hook-form";
import { z } from "zod";
import { Choice } from "@/look/field";
import { useTRPCClient } from "@/trpc/client";
import { problemsInCampaign } from "../check-in-campaign";
import { PartForm } from "../declare/part-form";
import { timeFromText } from "../entered-text";
import { formSchema } from "../form-schema";
import {
  emptyHypothesisDraft,
  hypothesisContent,
  hypothesisField,
  type HypothesisDraft,
} from "../register/hypothesis-draft";
import { PredictionCard } from "../register/prediction-card";
import { quantitiesOf } from "../register/quantity";
import { keepSealed } from "./keep-file";
import { KeepingFields, type KeepingDraft } from "./keeping-fields";

interface SealDraft extends HypothesisDraft, KeepingDraft {
  quantity: string;
}

const contentSchema = z.strictObject({
  until: time,
  keeping: z.enum(["held", "kept"]),
  prediction: predictionContentSchema,
});
type SealContent = { until: string; keeping: "held" | "kept"; prediction: PredictionContent };

/** Seals one prediction of a hypothesis: what it is of is public, what it says is not yet. */
export function SealPredictionForm(props: {
  document: CampaignDocument;
  ledger: string;
  hypothesis: Hypothesis;
}) {
  const { document, ledger, hypothesis } = props;
  const client = useTRPCClient();
  const { key } = document.campaign;
  const { team } = hypothesis;
  const defaults = useMemo(
    (): SealDraft => ({
      ...emptyHypothesisDraft(document, team),
      quantity: "",
      keeping: "held",
      until: "",
    }),
    [document, team],
  );
  const schema = useMemo(() => schemaIn(document, hypothesis), [document, hypothesis]);
  return (
    <PartForm
      name={`seal:${key}:${hypothesis.key}`}
      label="Seal a prediction"
      button="Seal prediction"
      defaults={defaults}
      schema={schema}
      under={/^\/seal(?=\/|$)/}
      field={fieldOf}
      send={async ({ until, keeping, prediction }) => {
        const sealing = { key, hypothesis: hypothesis.key, until };
        if (keeping === "held")
          return client.seals.prediction.mutate({ ...sealing, seal: { keeping, prediction } });
        const bound = { campaign: key, ledger, team, hypothesis: hypothesis.key, until };
        const { digest, measurand } = keepSealed({ ...bound, prediction, measurement: null });
        return client.seals.prediction.mutate({ ...sealing, seal: { keeping, digest, measurand } });
      }}
      done={({ keeping }) =>
        keeping === "held"
          ? "It is sealed, and will be opened by itself."
          : "It is sealed. Keep the file that was saved: only with it can you open the seal."
      }
    >
      <Fields document={document} hypothesis={hypothesis} />
    </PartForm>
  );
}

function Fields({ document, hypothesis }: { document: CampaignDocument; hypothesis: Hypothesis }) {
  const { register, formState, setValue } = useFormContext<SealDraft>();
  const chosen = useWatch<SealDraft, "quantity">({ name: "quantity" });
  const predictions = useWatch<SealDraft, "predictions">({ name: "predictions" });
  const quantities = useMemo(() => quantitiesOf(document), [document]);
  const spoken = new Set([
    ...hypothesis.predictions.map(({ measurand }) => measurand),
    ...hypothesis.withheld,
  ]);
  const open = predictions.filter(({ measurand }) => !spoken.has(measurand));
  const index = predictions.findIndex(({ measurand }) => measurand === chosen);
  const quantity = quantities.get(chosen);
  return (
    <>
      <Choice
        label="Quantity"
        gloss="measurand: public, what you say of it is not"
        error={formState.errors.quantity?.message}
        {...register("quantity", {
          onChange: (event: { target: { value: string } }) => {
            // One prediction is sealed at a time: the others say nothing here.
            for (const [at, { measurand }] of predictions.entries())
              setValue(
                `predictions.${at}.says`,
                measurand === event.target.value ? "number" : "silent",
              );
          },
        })}
      >
        <option value="">choose one that it is silent on</option>
        {open.map(({ measurand }) => (
          <option key={measurand} value={measurand}>
            {quantities.get(measurand)?.measurand.title ?? measurand}
          </option>
        ))}
      </Choice>
      {quantity === undefined || index < 0 ? null : (
        <PredictionCard document={document} quantity={quantity} index={index} sealing />
      )}
      <KeepingFields />
    </>
  );
}

function schemaIn(document: CampaignDocument, hypothesis: Hypothesis) {
  return formSchema<SealDraft, SealContent>({
    schema: contentSchema as z.ZodType<SealContent>,
    content: (draft) => ({
      until: timeFromText(draft.until),
      keeping: draft.keeping,
      prediction: (hypothesisContent(draft) as { predictions: unknown[] }).predictions[0],
    }),
    field: fieldOf,
    further: async (content) => {
      const { prediction } = content as { prediction: unknown };
      if (prediction === undefined) return [];
      const predictions = [...hypothesis.predictions, prediction];
      const part = { ...hypothesis, predictions };
      const problems = await problemsInCampaign(document, {
        list: "hypotheses",
        part,
        replaces: hypothesis.key,
      });
      const at = `/predictions/${hypothesis.predictions.length}`;
      return problems
        .filter(({ pointer }) => pointer === at || pointer.startsWith(`${at}/`))
        .map((problem) => ({
          ...problem,
          pointer: `/prediction${problem.pointer.slice(at.length)}`,
        }));
    },
  });
}

/** Nothing chosen yet stands at the choice; all else at the one card that speaks. */
function fieldOf(draft: SealDraft, path: readonly (string | number)[]): string {
  const [part, ...rest] = path;
  if (part === "measurand") return "quantity";
  if (part !== "prediction") return path.join(".");
  if (rest.length === 0 || rest[0] === "measurand") return "quantity";
  return hypothesisField(draft, ["predictions", 0, ...rest]);
}
