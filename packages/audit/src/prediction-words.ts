import type { Observable, Prediction } from "@weighhouse/campaign/document";
import { ABSENT, formatInterval, formatNumber } from "@weighhouse/figures/numbers";

type Of = Pick<Observable, "scale" | "unit"> | undefined;

/** What is expected, as it was filed: a number, an expression, a range, a probability. */
export function predictedRange(prediction: Prediction, observable: Of): string {
  const { expected, probability, tolerance } = prediction;
  const unit = unitOf(observable);
  if (probability !== null) return `probability ${formatNumber(probability)}`;
  if (typeof expected === "number") return `${formatNumber(expected)}${unit}`;
  if (typeof expected === "string") return `${expected}${unit}`;
  if (tolerance === null) return ABSENT;
  switch (tolerance.family) {
    case "interval":
      return `${formatInterval(tolerance.lower, tolerance.upper)}${unit}`;
    case "atMost":
      return `${formatInterval(null, tolerance.bound)}${unit}`;
    case "atLeast":
      return `${formatInterval(tolerance.bound, null)}${unit}`;
    case "gamma":
      return `${formatNumber(tolerance.mean)}${unit}`;
    default:
      return ABSENT;
  }
}

/** The tolerance in words; its sd in dex on a log10 scale. */
export function toleranceWords({ expected, tolerance }: Prediction, observable: Of): string {
  const unit = observable?.scale === "log10" ? " dex" : unitOf(observable);
  if (tolerance === null) return expected === null ? ABSENT : "exact";
  const sharing = tolerance.sharing === "common" ? "" : `, ${tolerance.sharing}`;
  switch (tolerance.family) {
    case "normal": {
      const size = tolerance.relative
        ? `${formatNumber(100 * tolerance.sd)} %`
        : `${formatNumber(tolerance.sd)}${unit}`;
      return `± ${size}${sharing}`;
    }
    case "splitNormal":
      return `+${formatNumber(tolerance.plus)} −${formatNumber(tolerance.minus)}${unit}`;
    case "gamma":
      return `gamma, ± ${formatNumber(tolerance.sd)}${unitOf(observable)}`;
    case "interval":
      return `interval${sharing}`;
    case "atMost":
    case "atLeast":
      return `hard bound${sharing}`;
  }
}

function unitOf(observable: Of): string {
  const unit = observable?.unit ?? null;
  return unit === null || unit === "1" ? "" : ` ${unit}`;
}
