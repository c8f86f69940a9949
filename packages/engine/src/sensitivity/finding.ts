import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { Sensitivity } from "@weighhouse/campaign/sensitivity";
import type { Standings } from "@weighhouse/campaign/standings";

type Row = Sensitivity["changes"][number];

/** Changes that are named in the sentence, at most. */
const NAMED = 5;

/** In words: what would have to go for the leader to change, or that nothing single would. */
export function findingOf(document: CampaignDocument, standings: Standings, rows: Row[]): string {
  const [first] = standings.hypotheses;
  if (first === undefined || first.lnEvidence === null) return "No hypothesis leads.";
  const title = titleOf(document, first.key);
  const turning = rows.filter(({ leaderChanges }) => leaderChanges);
  if (turning.length === 0) {
    return `${title} leads, and no single change listed here would give the lead to another.`;
  }
  const named = turning.slice(0, NAMED).map((row) => {
    const to = row.leader === null ? "none" : titleOf(document, row.leader);
    return `${changeInWords(row)} (then ${to})`;
  });
  const rest = turning.length - named.length;
  const more = rest > 0 ? `; and ${rest} more` : "";
  return `${title} leads; it would not ${named.join("; ")}${more}.`;
}

function titleOf({ hypotheses }: CampaignDocument, key: string): string {
  return hypotheses.find((one) => one.key === key)?.title ?? "Silence on everything";
}

/** A change as a phrase after "with the campaign scored": "without the facility x". */
export function changeInWords({ kind, key }: Pick<Row, "kind" | "key">): string {
  switch (kind) {
    case "without-facility":
      return `without the facility ${key}`;
    case "without-measurand":
      return `without the quantity ${key}`;
    case "without-team":
      return `without ${key}'s own measurements`;
    case "without-measurement":
      return `without the measurement ${key}`;
    case "without-provisional":
      return "without provisional measurements";
    case "only-before-observation":
      return "with predictions filed before observation only";
    case "same-data-swapped":
      return `with ${key} in place of its counted alternative`;
    case "shared-error-doubled":
      return `with the shared error ${key} doubled`;
    case "shared-error-absent":
      return `without the shared error ${key}`;
    case "tolerances-halved":
      return "with all tolerances halved";
    case "tolerances-doubled":
      return "with all tolerances doubled";
    case "prior-halved":
      return `with the prior of ${key} half as wide`;
    case "prior-doubled":
      return `with the prior of ${key} twice as wide`;
    case "disagreeing-inflated":
      return "with disagreeing measurements' uncertainties times their Birge ratio";
    case "references-doubled":
      return "with references twice as wide";
    case "equal-weights":
      return "with equal weights";
  }
}
