import type {
  CampaignDocument,
  Hypothesis,
  Measurand,
  Observable,
  Prediction,
} from "@weighhouse/campaign/document";
import type { MeasurandStanding, Standings, VerdictRow } from "@weighhouse/campaign/standings";
import { inWindowOrder } from "@/standings/table-rows";

export interface FiledPrediction {
  measurand: Measurand;
  observable: Observable;
  prediction: Prediction;
  /** When it was filed: its own time, else its hypothesis's. */
  filedAt: string | null;
  verdict: { row: VerdictRow; at: string } | null;
  combined: { value: NonNullable<MeasurandStanding["combined"]>; at: string } | null;
}

/** A hypothesis's predictions in window order, those filed before data apart from those after. */
export function filedPredictions(
  document: CampaignDocument,
  standings: Standings | null,
  hypothesis: Hypothesis,
): { before: FiledPrediction[]; after: FiledPrediction[] } {
  const predictions = new Map(hypothesis.predictions.map((each) => [each.measurand, each]));
  const observables = new Map(document.observables.map((each) => [each.key, each]));
  const rows = inWindowOrder(document.measurands).flatMap((measurand) => {
    const prediction = predictions.get(measurand.key);
    const observable = observables.get(measurand.observable);
    if (!prediction || !observable) return [];
    return [
      {
        measurand,
        observable,
        prediction,
        filedAt: prediction.registeredAt ?? hypothesis.registeredAt,
        verdict: verdictOf(standings, hypothesis.key, measurand.key),
        combined: combinedOf(standings, measurand.key),
      },
    ];
  });
  const isAfter = (row: FiledPrediction) => row.verdict?.row.order === "after";
  return { before: rows.filter((row) => !isAfter(row)), after: rows.filter(isAfter) };
}

function verdictOf(standings: Standings | null, hypothesis: string, measurand: string) {
  const place =
    standings?.verdicts.findIndex(
      (row) => row.hypothesis === hypothesis && row.measurand === measurand,
    ) ?? -1;
  const row = standings?.verdicts[place];
  return row ? { row, at: `/verdicts/${place}` } : null;
}

function combinedOf(standings: Standings | null, measurand: string) {
  const place = standings?.measurands.findIndex((each) => each.key === measurand) ?? -1;
  const value = standings?.measurands[place]?.combined;
  return value ? { value, at: `/measurands/${place}/combined` } : null;
}
