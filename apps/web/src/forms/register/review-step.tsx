"use client";

import type { CampaignDocument, Hypothesis } from "@weighhouse/campaign/document";
import { formatInterval, formatNumber } from "@weighhouse/figures/numbers";
import { useEffect, useMemo, useState, type ReactNode } from "react";
import { useFormContext } from "react-hook-form";
import { Button } from "@/look/button";
import { Section } from "@/look/section";
import { Table } from "@/look/table";
import type { HypothesisDraft, PredictionDraft } from "./hypothesis-draft";
import { weAreWrongIf, type SpokenPrediction } from "./prediction-words";
import { requestOfDraft } from "./preview-request";
import { quantitiesOf, supposedSd, unitAfter, type Quantity } from "./quantity";
import type { Registrant } from "./registrant";
import type { Step } from "./steps";
import { previewOf } from "./use-preview";

interface Said {
  draft: PredictionDraft;
  quantity: Quantity;
  spoken: SpokenPrediction;
}

/** The last page: reads like a signed statement, and holds the sentence for the paper. */
export function ReviewStep(props: {
  document: CampaignDocument;
  registrant: Registrant;
  amending: Hypothesis | null;
  go: (step: Step) => void;
  children: ReactNode;
}) {
  const { document, registrant, amending, children } = props;
  const { getValues } = useFormContext<HypothesisDraft>();
  const values = getValues();
  const said = useSaid(document, values);
  const team = document.teams.find(({ key }) => key === registrant.team)?.title;
  const silent = values.predictions.filter(({ says }) => says === "silent");
  const quantities = quantitiesOf(document);
  return (
    <Section title="Review" gloss="what goes on the record">
      <div className="max-w-[80ch] border-l border-rule pl-4 sm:pl-6">
        <p className="mb-3 font-serif text-[17px]">
          {registrant.name}
          {team ? `, for ${team},` : ""} {amending ? "amends" : "registers"} in “
          {document.campaign.title}” the hypothesis
        </p>
        <h3 className="mb-1 text-[20px]">{values.title || "without a title"}</h3>
        {values.statement.trim() === "" ? null : (
          <p className="mb-3 whitespace-pre-line">{values.statement}</p>
        )}
        {said.length > 0 ? <PredictionTable said={said} /> : null}
        <p className="mt-3">
          {silent.length === 0
            ? "It is silent on nothing that was declared."
            : `It is silent on ${silent.map(({ measurand }) => quantities.get(measurand)?.measurand.title ?? measurand).join("; ")}, and is charged the no-model range there.`}
        </p>
        <WrongIf sentence={weAreWrongIf(said.map(({ spoken }) => spoken))} />
        <p className="mt-3 text-[14px] text-quiet">
          {amending
            ? "The earlier version stays on record. Predictions that you changed take the time of this amendment."
            : "It enters the ledger with its time, and stays there. Its key can’t change; a later version stands beside it, never in its place."}{" "}
          <OrderWords said={said} closed={registrant.registrationClosed} />
        </p>
      </div>
      <div className="mt-4">{children}</div>
    </Section>
  );
}

function PredictionTable({ said }: { said: readonly Said[] }) {
  return (
    <Table
      caption="Predictions"
      head={
        <tr>
          <th scope="col">Quantity</th>
          <th scope="col" className="number">
            Expected
          </th>
          <th scope="col">True value, if right</th>
          <th scope="col">Decisive</th>
        </tr>
      }
    >
      {said.map(({ draft, quantity, spoken }) => (
        <tr key={draft.measurand}>
          <th scope="row">{quantity.measurand.title}</th>
          <td className="number" data-label="Expected">
            {spoken.expected === null ? draft.expected : formatNumber(spoken.expected)}
            {unitAfter(quantity)}
          </td>
          <td data-label="True value, if right">
            {draft.tolerance === "exact"
              ? "exactly that"
              : spoken.interval === null
                ? "…"
                : `${formatInterval(spoken.interval.lower, spoken.interval.upper)}${unitAfter(quantity)}`}
          </td>
          <td data-label="Decisive">{draft.decisive ? "decisive" : "no"}</td>
        </tr>
      ))}
    </Table>
  );
}

function WrongIf({ sentence }: { sentence: string }) {
  const [copied, setCopied] = useState(false);
  return (
    <figure className="mt-4 border-y border-rule py-3">
      <figcaption className="mb-1 flex flex-wrap items-center justify-between gap-2 text-[14px] text-quiet">
        The sentence for the paper
        <Button
          className="text-[14px]"
          onClick={() => {
            void navigator.clipboard?.writeText(sentence).then(() => setCopied(true));
          }}
        >
          {copied ? "Copied" : "Copy the sentence"}
        </Button>
      </figcaption>
      <blockquote className="font-serif text-[17px]">{sentence}</blockquote>
    </figure>
  );
}

function OrderWords({ said, closed }: { said: readonly Said[]; closed: boolean }) {
  const measured = said.filter(({ quantity }) => quantity.measurand.firstPostedAt !== null);
  if (closed)
    return "Registration has closed: every prediction is marked as filed after data, and counts as silence in the standings.";
  if (measured.length === 0) return "";
  return `Filed after data, and counted as silence in the standings: ${measured.map(({ quantity }) => quantity.measurand.title).join("; ")}.`;
}

/** The predictions with the intervals that the engine gives them. */
function useSaid(document: CampaignDocument, values: HypothesisDraft): Said[] {
  const drafts = useMemo(
    () => values.predictions.filter(({ says }) => says === "number"),
    [values.predictions],
  );
  const quantities = useMemo(() => quantitiesOf(document), [document]);
  const [previews, setPreviews] = useState<Record<string, SpokenPrediction>>({});
  useEffect(() => {
    let wanted = true;
    void Promise.all(
      drafts.map(async (draft) => spokenOf(document, draft, quantities.get(draft.measurand))),
    ).then((all) => (wanted ? setPreviews(Object.fromEntries(all)) : undefined));
    return () => {
      wanted = false;
    };
  }, [document, drafts, quantities]);
  return drafts.flatMap((draft) => {
    const quantity = quantities.get(draft.measurand);
    const spoken = previews[draft.measurand];
    return quantity === undefined || spoken === undefined ? [] : [{ draft, quantity, spoken }];
  });
}

async function spokenOf(
  document: CampaignDocument,
  draft: PredictionDraft,
  quantity: Quantity | undefined,
): Promise<[string, SpokenPrediction]> {
  const request =
    quantity === undefined ? null : requestOfDraft(draft, supposedSd(document, quantity));
  const state = request === null ? null : await previewOf(document, request);
  const preview = state?.state === "ready" ? state.preview : null;
  return [
    draft.measurand,
    {
      title: quantity?.measurand.title ?? draft.measurand,
      unit: quantity?.unit ?? null,
      expected: preview?.expected ?? null,
      interval: preview?.interval ?? null,
      decisive: draft.decisive,
    },
  ];
}
