import type { Distribution } from "../distribution/distribution";

/** A measurand's measurements taken together, or a derived value, in scoring space. */
export interface Combination {
  value: number;
  sd: number;
  /** Null where a density is taken, and for derived values; so are the next three. */
  chiSquare: number | null;
  degreesOfFreedom: number | null;
  /** sqrt(chi2 / dof); null without degrees of freedom. */
  birgeRatio: number | null;
  /** Of the measurements agreeing with one another; null without degrees of freedom. */
  pValue: number | null;
  /** What is known of the true value: normal, a density, or draws. */
  trueValue: Distribution;
  /** No value among the measurements: the reference had a part in it. */
  limitsOnly: boolean;
}

/** One whose true value is normal, about a value of least squares. */
export function normalCombination(
  { value, sd }: { value: number; sd: number },
  fit: Pick<Combination, "chiSquare" | "degreesOfFreedom" | "pValue">,
): Combination {
  const { chiSquare, degreesOfFreedom, pValue } = fit;
  const birgeRatio =
    chiSquare !== null && degreesOfFreedom !== null && degreesOfFreedom > 0
      ? Math.sqrt(chiSquare / degreesOfFreedom)
      : null;
  const trueValue = { kind: "normal" as const, mean: value, sd };
  return {
    value,
    sd,
    chiSquare,
    degreesOfFreedom,
    birgeRatio,
    pValue,
    trueValue,
    limitsOnly: false,
  };
}

const NO_FIT = { chiSquare: null, degreesOfFreedom: null, birgeRatio: null, pValue: null };

/** One that a density or draws stand for. */
export function spreadCombination(
  { value, sd }: { value: number; sd: number },
  trueValue: Distribution,
  limitsOnly: boolean,
): Combination {
  return { value, sd, ...NO_FIT, trueValue, limitsOnly };
}
