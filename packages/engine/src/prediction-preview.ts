import type { CampaignDocument, Prediction } from "@weighhouse/campaign/document";
import type { Result } from "@weighhouse/campaign/problem";

export interface PredictionDraft {
  measurand: string;
  expected: Prediction["expected"];
  tolerance: Prediction["tolerance"];
}

/** Values in the observable's unit (natural also on log10); an unbounded end is null. */
export interface ValueRange {
  lower: number | null;
  upper: number | null;
}

export interface PredictionPreview {
  expected: number;
  /** What the verdict takes as the prediction's interval; lower = upper for an exact prediction. */
  interval: ValueRange;
  /** The reference's range: its bounds, or 4 sd about its mean. */
  reference: ValueRange;
  /** Share of the reference's probability inside the interval, 0 to 1; 0 for an exact prediction. */
  shareOfReference: number;
  /** Measured values that would pass; null where a measurement so coarse can't pass. */
  passes: ValueRange | null;
  /** Measured values at or below `below`, or at or above `above`, would fail; null where none would. */
  fails: { below: number | null; above: number | null };
  /** log10 B against the reference if the value measured is the one expected. */
  hit: { log10BayesFactor: number };
  /** log10 B against the reference at the nearest value that fails; null where none would. */
  miss: { value: number; log10BayesFactor: number } | null;
}

/** What one measurement of that sd (in the observable's unit; dex on log10) would make of a prediction. */
export function previewPrediction(
  _document: CampaignDocument,
  _draft: PredictionDraft,
  _measured: { sd: number },
): Result<PredictionPreview> {
  throw new Error("being built");
}
