import { unitText } from "@/look/unit-text";
import { formatInterval, formatNumber } from "@weighhouse/figures/numbers";

/** What the review says of one prediction. */
export interface SpokenPrediction {
  title: string;
  unit: string | null;
  expected: number | null;
  /** Where the true value may lie, in the observable's unit; null ends are open. */
  interval: { lower: number | null; upper: number | null } | null;
  decisive: boolean;
}

/**
 * The sentence for the paper. With decisive predictions, each of those alone is enough to be
 * wrong, and the others are told apart; without, every prediction stands on its own.
 */
export function weAreWrongIf(predictions: readonly SpokenPrediction[]): string {
  const decisive = predictions.filter((each) => each.decisive);
  const others = predictions.filter((each) => !each.decisive);
  if (predictions.length === 0)
    return "We predict nothing that was declared, so no measurement can show us wrong.";
  if (decisive.length === 0) return `We are wrong if ${joined(predictions.map(clause))}.`;
  const first = `We are wrong if ${joined(decisive.map(clause))}.`;
  return others.length === 0
    ? first
    : `${first} It counts against us if ${joined(others.map(clause))}.`;
}

function clause(prediction: SpokenPrediction): string {
  const unit =
    prediction.unit === null || prediction.unit === "1" ? "" : ` ${unitText(prediction.unit)}`;
  const { interval, expected } = prediction;
  const subject = `the true value of “${prediction.title}”`;
  if (interval !== null && interval.lower !== null && interval.upper !== null) {
    if (interval.lower !== interval.upper)
      return `${subject} lies outside ${formatInterval(interval.lower, interval.upper)}${unit}`;
    return `${subject} is not ${formatNumber(interval.lower)}${unit}`;
  }
  return expected === null
    ? `${subject} is not as we say`
    : `${subject} is not ${formatNumber(expected)}${unit}`;
}

function joined(clauses: readonly string[]): string {
  const last = clauses.at(-1) ?? "";
  if (clauses.length < 2) return last;
  return `${clauses.slice(0, -1).join(", or if ")}, or if ${last}`;
}
