import { compileExpression, type Expression } from "@weighhouse/campaign/expression";
import { normalCombination, spreadCombination, type Combination } from "../combination/combination";
import { perMeasurand } from "../combination/memo";
import type { DerivedFrame, Frame } from "../frame";
import type { Workspace } from "../workspace";
import { drawValue } from "./draws";
import { inputCovariance, inputsOf, type Input } from "./inputs";
import { linearise, secondOrderShift, varianceOf, type Propagated } from "./linear";

/** A derived value, and how it hangs on its inputs. */
export interface DerivedValue {
  combination: Combination;
  inputs: readonly Input[];
  /** d value / d input in scoring spaces, times what makes J C J' its variance; null: not known. */
  slopes: readonly number[] | null;
}

/** Of the sd: a larger shift of the mean by curvature asks for draws. */
const MOST_SHIFT = 0.05;

/**
 * The expression over the inputs' combined values (section 6): linearised in scoring spaces, or by
 * draws where curvature shifts the mean by more than 5 % of the sd, or an input has only limits.
 *
 * @returns null until every input has a combined value, and where the expression has none
 * Source: GUM (JCGM 100:2008) 5.2.2, (13); JCGM 101:2008.
 */
export const derivedValue = perMeasurand(compute);

function compute(workspace: Workspace, measurand: number): DerivedValue | null {
  const { frame } = workspace;
  const { derived, scale, period } = frame.measurands[measurand]!;
  const { from } = derived!;
  const distinct = [...new Set(from.map((one) => one.measurand))];
  const inputs = inputsOf(workspace, distinct);
  if (inputs === null) return null;
  const of: Propagated = {
    expression: expressionOf(derived!),
    names: from.map(({ name }) => name),
    inputOf: from.map((one) => distinct.indexOf(one.measurand)),
    scales: distinct.map((one) => frame.measurands[one]!.scale),
    scale,
    period,
  };
  const covariance = covarianceOf(frame, inputs);
  const linear = linearise(
    of,
    inputs.map(({ combination }) => combination.value),
  );
  const sd = linear === null ? 0 : Math.sqrt(varianceOf(linear.slopes, covariance));
  const limits = inputs.some(({ combination }) => combination.limitsOnly);
  if (linear !== null && !limits) {
    const shift = secondOrderShift(linear.curvature, covariance);
    if (sd > 0 && Math.abs(shift) <= MOST_SHIFT * sd) {
      return { combination: linearCombination(linear.value, sd), inputs, slopes: linear.slopes };
    }
  }
  const drawn = drawValue(
    of,
    inputs.map(({ combination }) => combination.trueValue),
    covariance,
  );
  if (drawn === null) return null;
  const combination = spreadCombination(drawn, drawn.draws, false);
  // What the draws have more, or less, of spread than the slopes tell is given to every part alike.
  const share = sd > 0 ? drawn.sd / sd : null;
  const slopes =
    linear === null || share === null ? null : linear.slopes.map((slope) => slope * share);
  return { combination, inputs, slopes };
}

function linearCombination(value: number, sd: number): Combination {
  const none = { chiSquare: null, degreesOfFreedom: null, pValue: null };
  return normalCombination({ value, sd }, none);
}

function covarianceOf(frame: Frame, inputs: readonly Input[]): Float64Array {
  const n = inputs.length;
  const covariance = new Float64Array(n * n);
  inputs.forEach((a, i) => {
    inputs.forEach((b, j) => {
      const { own, shared } = inputCovariance(frame, a, b);
      covariance[i * n + j] = own + shared;
    });
  });
  return covariance;
}

const expressions = new WeakMap<DerivedFrame, Expression>();

function expressionOf(derived: DerivedFrame): Expression {
  const there = expressions.get(derived);
  if (there !== undefined) return there;
  const names = new Set(derived.from.map(({ name }) => name));
  const compiled = compileExpression(derived.expression, { names });
  if (!compiled.ok) throw new TypeError(`a derived value's expression: ${derived.expression}`);
  expressions.set(derived, compiled.expression);
  return compiled.expression;
}
