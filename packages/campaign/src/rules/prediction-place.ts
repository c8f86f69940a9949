import type { Hypothesis, Measurand, Observable, Prediction } from "../document";
import type { Legible } from "../form";

/** Where a prediction stands, and what it is about. */
export type PredictionPlace = {
  hypothesis: Legible<Hypothesis>;
  hypothesisPointer: string;
  prediction: Legible<Prediction>;
  pointer: string;
  observable: Legible<Observable> | undefined;
  /** Where parts of the hypothesis that expressions use have been found wrong. */
  faults: readonly string[];
  /** Whether the names of the hypothesis could all be read. */
  whole: boolean;
  /** Undefined also for a derived value, which has no conditions. */
  measurand: Legible<Measurand> | undefined;
};
