import { onCircle } from "./combination/cyclic";
import type { Frame, PredictionFrame } from "./frame";
import { toNatural } from "./scoring-space";
import { intervalOf } from "./verdict";

/**
 * Where a prediction says that the true value lies, in the observable's unit; an unbounded end is
 * infinite. An exact prediction's is the number that was given, not what two logarithms make of it;
 * on a circle an interval may run through the period's end, lower > upper.
 */
export function naturalInterval(
  frame: Frame,
  prediction: PredictionFrame,
): { lower: number | null; upper: number | null } {
  const { scale, period } = frame.measurands[prediction.measurand]!;
  const { tolerance, natural } = prediction;
  if (tolerance.family === "exact" && natural !== null) return { lower: natural, upper: natural };
  const interval = intervalOf(frame, prediction);
  if (interval === null) return { lower: null, upper: null };
  const [lower, upper] = [interval.lower, interval.upper];
  if (period > 0) {
    if (upper - lower >= period) return { lower: 0, upper: period };
    return { lower: turned(lower, period), upper: turned(upper, period) };
  }
  const inUnit = (bound: number) => (Number.isFinite(bound) ? toNatural(bound, scale) : bound);
  return { lower: inUnit(lower), upper: inUnit(upper) };
}

/** A bound on the circle: as it is where it lies from 0 to the period. */
function turned(bound: number, period: number): number {
  return bound >= 0 && bound <= period ? bound : onCircle(bound, period);
}
