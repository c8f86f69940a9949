"use client";

import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { ReactNode } from "react";
import { useMemo } from "react";
import { useFormContext, useWatch } from "react-hook-form";
import { Empty, Notice } from "@/look/notice";
import { Section } from "@/look/section";
import type { HypothesisDraft } from "./hypothesis-draft";
import { PredictionCard } from "./prediction-card";
import { quantitiesOf } from "./quantity";

/** A prediction or silence for every quantity of the campaign. */
export function PredictionsStep(props: { document: CampaignDocument; children: ReactNode }) {
  const { document, children } = props;
  const { formState } = useFormContext<HypothesisDraft>();
  const predictions = useWatch<HypothesisDraft, "predictions">({ name: "predictions" });
  const quantities = useMemo(() => quantitiesOf(document), [document]);
  const spoken = predictions.filter(({ says }) => says === "number").length;
  const { message } = formState.errors.predictions ?? {};
  return (
    <Section
      title="Predictions"
      gloss={`${spoken} of ${predictions.length} quantities predicted, silent on ${predictions.length - spoken}`}
    >
      {message ? (
        <Notice role="alert" tone="bad">
          {message}
        </Notice>
      ) : null}
      {predictions.length === 0 ? (
        <Empty title="There is nothing to predict yet.">
          The coordinator declares the quantities first. What you typed so far is kept here.
        </Empty>
      ) : null}
      <div>
        {predictions.map(({ measurand }, index) => {
          const quantity = quantities.get(measurand);
          return quantity === undefined ? null : (
            <PredictionCard key={measurand} document={document} quantity={quantity} index={index} />
          );
        })}
      </div>
      <div className="mt-2 flex flex-wrap gap-3">{children}</div>
    </Section>
  );
}
