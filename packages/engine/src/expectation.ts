import type { Hypothesis, Prediction } from "@weighhouse/campaign/document";
import { compileExpression, compileSlots } from "@weighhouse/campaign/expression";
import type { Problem, Result } from "@weighhouse/campaign/problem";
import type { Expectation, MeasurandFrame } from "./frame";
import { inLogarithms, isLogged } from "./log-parameters";

/** What a prediction expects: a number, a function of slots, or nothing. */
export interface Expected {
  /** In the observable's unit. */
  natural: number | null;
  expectation: Expectation | null;
}

/** What a prediction expects, where it is compiled and what it may name. */
interface Place {
  pointer: string;
  declared: Hypothesis;
  frame: MeasurandFrame;
}

/**
 * Compiles `expected` over its slots: parameters, columns, and for a curve its conditions. One that
 * reads none but fixed parameters is a number.
 */
export function expectationOf(
  { expected }: Pick<Prediction, "expected">,
  { pointer, declared, frame }: Place,
): Result<Expected> {
  if (typeof expected !== "string") {
    return { ok: true, value: { natural: expected, expectation: null } };
  }
  const { parameters, ensemble, tables } = declared;
  const { curve, conditions } = frame;
  const columns = Object.keys(ensemble?.columns ?? {});
  const slots = [...parameters.map(({ key }) => key), ...columns, ...(curve ? conditions : [])];
  const compiled = compileExpression(expected, {
    names: new Set(slots),
    tables: new Map(tables.map((table) => [table.key, table])),
  });
  if (!compiled.ok) {
    const at = `${pointer}/expected`;
    const problems = compiled.faults.map((fault): Problem => ({
      pointer: at,
      code: "bad-expression",
      ...fault,
    }));
    return { ok: false, problems };
  }
  const { expression } = compiled;
  const uses = [...slots.keys()].filter((slot) => expression.names.has(slots[slot]!));
  const evaluate = compileSlots(expression, slots);
  if (uses.some((slot) => parameters[slot]?.prior.family !== "fixed")) {
    const inLogs = inLogarithms(
      expression,
      new Set(parameters.filter(isLogged).map(({ key }) => key)),
    );
    const expectation: Expectation = { expression, inLogs, slots, uses, evaluate };
    return { ok: true, value: { natural: null, expectation } };
  }
  const values = new Float64Array(slots.length);
  parameters.forEach(({ prior }, slot) => {
    if (prior.family === "fixed") values[slot] = prior.value;
  });
  return { ok: true, value: { natural: evaluate(values), expectation: null } };
}
