import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { HypothesisContent } from "@weighhouse/campaign/entries";
import { readPayload } from "@weighhouse/campaign/payloads";
import { problemLine } from "@weighhouse/campaign/problem";
import { openMeasurands } from "./hypothesis-draft";

export type HypothesisFromJson =
  { ok: true; hypothesis: HypothesisContent } | { ok: false; lines: string[] };

/**
 * A hypothesis as a campaign document holds it. Refused whole where the form could not show some
 * of it, so that nothing pasted is dropped in silence.
 */
export function hypothesisFromJson(text: string, document: CampaignDocument): HypothesisFromJson {
  let value: unknown;
  try {
    value = JSON.parse(text);
  } catch (error) {
    return { ok: false, lines: [`Not JSON: ${(error as Error).message}`] };
  }
  const read = readPayload("hypothesis.registered", withoutDates(value));
  if (!read.ok) return { ok: false, lines: read.problems.map(problemLine) };
  const lines = notOnForm(read.value, document);
  return lines.length > 0 ? { ok: false, lines } : { ok: true, hypothesis: read.value };
}

/** A document's own dates count for nothing: the ledger gives the time. */
function withoutDates(value: unknown): unknown {
  if (typeof value !== "object" || value === null) return value;
  const { registeredAt: _dropped, ...rest } = value as { registeredAt?: unknown };
  return rest;
}

type Shown = Omit<HypothesisContent, "claimed">;

/** What of a hypothesis the form can't show, by place; empty where it shows all. */
export function notOnForm(hypothesis: Shown, document: CampaignDocument): string[] {
  const known = new Set(openMeasurands(document).map(({ key }) => key));
  const lists = ["parameters", "tables", "withheld", "toleranceCorrelations"] as const;
  return [
    ...lists
      .filter((list) => hypothesis[list].length > 0)
      .map((list) => `/${list}: found ${hypothesis[list].length}; allowed none on this form`),
    ...(hypothesis.ensemble === null ? [] : ["/ensemble: found one; allowed none on this form"]),
    ...hypothesis.predictions.flatMap((prediction, index) => {
      const at = `/predictions/${index}`;
      const { tolerance } = prediction;
      if (!known.has(prediction.measurand))
        return [
          `${at}/measurand: found ${prediction.measurand}; allowed ${[...known].join(", ") || "none yet"}`,
        ];
      if (
        prediction.expected === null ||
        prediction.given !== null ||
        prediction.probability !== null
      )
        return [`${at}: found no plain expected value; allowed expected with a tolerance or none`];
      if (
        tolerance !== null &&
        (tolerance.family !== "normal" || tolerance.relative || tolerance.sharing === "smooth")
      )
        return [
          `${at}/tolerance: found ${tolerance.family}; allowed normal with an absolute sd, shared common or each`,
        ];
      return [];
    }),
  ];
}
