import { compileSlots } from "@weighhouse/campaign/expression";
import { designOf } from "@weighhouse/campaign/expression-linearity";
import type { Expectation, HypothesisFrame, PredictionFrame } from "../frame";
import { isLogged } from "../log-parameters";
import { toScoringSpace } from "../scoring-space";
import { linearUnknown, outerUnknown } from "./parameters";
import type { Expected, Section } from "./section";
import { parameterKey } from "./shared-unknowns";

/**
 * Puts what an expression expects into a section: its value wherever the outer unknowns and the
 * ensemble's row are, and a column for each linear parameter.
 */
export function expectExpression(section: Section, prediction: PredictionFrame): Expected {
  const { assembly, rows, begin, frame, centre, linear } = section;
  const expectation = prediction.expectation!;
  const said = assembly.frame.hypotheses[prediction.hypothesis]!;
  const sources = sourcesOf(section, prediction);
  const moving = sources.moving.size > 0;
  const slots = slotsFor(section, expectation, said);
  const expected: Expected = { values: new Float64Array(rows.length), moving, coefficients: [] };
  const constant = !slots.conditional(expectation.uses);
  const fill = (base: Float64Array): boolean => {
    slots.takeScope();
    for (let i = 0; i < rows.length; i += 1) {
      if (i === 0 || !constant) {
        slots.takeConditions(i);
        expected.values[i] = expectation.evaluate(slots.values);
      } else expected.values[i] = expected.values[0]!;
      const value = toScoringSpace(expected.values[i]!, frame.scale);
      if (!Number.isFinite(value)) return false;
      base[begin + i] = value - centre;
    }
    return true;
  };
  if (moving) assembly.expect(fill);
  else if (!fill(assembly.base)) assembly.impossible = true;
  const names = [...linear].filter((slot) => expectation.uses.includes(slot));
  const design = designOf(
    expectation.inLogs,
    names.map((slot) => expectation.slots[slot]!),
    frame.scale === "log10",
  );
  for (const slot of names) {
    const slope = design.slopes.get(expectation.slots[slot]!)!;
    const { unknown, step } = linearUnknown(said.parameters[slot]!.prior);
    const place = assembly.addLinear(parameterKey(prediction.hypothesis, slot), unknown);
    const evaluate = compileSlots(slope, expectation.slots);
    const uses = expectation.uses.filter((one) => slope.names.has(expectation.slots[one]!));
    const put = (each: (row: number, value: number) => void) => {
      slots.takeScope();
      slots.takeLogarithms(uses);
      for (let i = 0; i < rows.length; i += 1) {
        slots.takeConditions(i);
        each(begin + i, evaluate(slots.values) * step);
      }
    };
    if (uses.some((one) => sources.moving.has(one))) {
      assembly.loadMoving(place, (column) => put((row, value) => (column[row] = value)));
    } else put((row, value) => assembly.load(place, row, value));
  }
  return expected;
}

/** Adds what is expected's outer parameters; `moving` are the slots that change. */
function sourcesOf({ assembly, linear }: Section, prediction: PredictionFrame) {
  return { moving: addOuterParameters(assembly, prediction, linear) };
}

/** Makes the free parameters that aren't linear outer unknowns, written into the scope by each move. */
export function addOuterParameters(
  assembly: Section["assembly"],
  { expectation, hypothesis }: PredictionFrame,
  linear: ReadonlySet<number>,
): Set<number> {
  const { parameters, ensemble } = assembly.frame.hypotheses[hypothesis]!;
  const scope = assembly.scopeOf(hypothesis);
  const moving = new Set<number>();
  for (const slot of expectation!.uses) {
    if (slot >= scope.length) continue;
    const parameter = parameters[slot];
    if (parameter === undefined) {
      const column = ensemble!.columns[slot - parameters.length]!;
      assembly.move((scenario) => (scope[slot] = column[scenario]!));
      moving.add(slot);
    } else if (parameter.prior.family === "fixed") scope[slot] = parameter.prior.value;
    else if (linear.has(slot)) scope[slot] = linearUnknown(parameter.prior).from;
    else {
      const { prior } = parameter;
      const place = assembly.addOuter(parameterKey(hypothesis, slot), () =>
        outerUnknown(prior, { counted: true }),
      );
      assembly.move(() => (scope[slot] = assembly.values[place]!));
      moving.add(slot);
    }
  }
  return moving;
}

/** The expression's slots, filled from the hypothesis's scope and a row's conditions. */
function slotsFor(
  { assembly, rows, part }: Section,
  { slots }: Expectation,
  said: HypothesisFrame,
) {
  const hypothesis = part.role.kind === "predicted" ? part.role.prediction.hypothesis : -1;
  const scope = assembly.scopeOf(hypothesis);
  const values = new Float64Array(slots.length);
  const own = said.parameters.length + (said.ensemble?.columns.length ?? 0);
  return {
    values,
    conditional: (uses: readonly number[]) => uses.some((slot) => slot >= own),
    takeScope: () => values.set(scope),
    /** In slopes the log10 of some parameters is meant. */
    takeLogarithms: (uses: readonly number[]) => {
      for (const slot of uses) {
        const parameter = said.parameters[slot];
        if (parameter !== undefined && isLogged(parameter))
          values[slot] = Math.log10(values[slot]!);
      }
    },
    takeConditions: (i: number) => {
      const { conditions } = rows[i]!;
      for (let slot = own; slot < slots.length; slot += 1) values[slot] = conditions[slot - own]!;
    },
  };
}
