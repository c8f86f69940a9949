import { combinedErrors, type CombinedErrors } from "../combination/errors";
import { perMeasurand } from "../combination/memo";
import { combineMeasured } from "../combination/measured";
import type { Combination } from "../combination/combination";
import type { Frame } from "../frame";
import type { Workspace } from "../workspace";

/** A measurand that derived values are computed from, as its measurements give it. */
export interface Input {
  measurand: number;
  combination: Combination;
  errors: CombinedErrors;
}

/** @returns null where one of them has no combined value yet */
export function inputsOf(workspace: Workspace, measurands: readonly number[]): Input[] | null {
  const inputs: Input[] = [];
  for (const measurand of measurands) {
    const input = inputOf(workspace, measurand);
    if (input === null) return null;
    inputs.push(input);
  }
  return inputs;
}

const inputOf = perMeasurand((workspace, measurand): Input | null => {
  const combination = combineMeasured(workspace, measurand);
  if (combination === null) return null;
  return { measurand, combination, errors: combinedErrors(workspace, measurand, combination) };
});

/**
 * Covariance of two inputs: of their own noises, which are correlated where measurements of the two
 * are, and of the shared errors that both load.
 */
export function inputCovariance(frame: Frame, a: Input, b: Input): { own: number; shared: number } {
  let shared = 0;
  for (const [draw, loading] of a.errors.loadings) {
    shared += loading * (b.errors.loadings.get(draw) ?? 0);
  }
  if (a.measurand === b.measurand) return { own: a.errors.ownVariance, shared };
  let own = 0;
  if (a.errors.correlated.size > 0 && b.errors.correlated.size > 0) {
    for (const { a: first, b: second, coefficient } of frame.document.correlations) {
      own += coefficient * product(a, b, first, second);
      own += coefficient * product(a, b, second, first);
    }
  }
  return { own, shared };
}

function product(a: Input, b: Input, first: string, second: string): number {
  return (a.errors.correlated.get(first) ?? 0) * (b.errors.correlated.get(second) ?? 0);
}
