import type { CampaignDocument, Hypothesis, Measurand } from "@weighhouse/campaign/document";
import { compileExpression } from "@weighhouse/campaign/expression";
import type { Standings } from "@weighhouse/campaign/standings";

/** What a hypothesis expects along a condition. */
export interface PlotCurve {
  key: string;
  title: string;
  index: number;
  points: { x: number; value: number }[];
}

const steps = 60;

/**
 * What each hypothesis expects along a condition, at its parameters' posterior means. One whose
 * expectation hangs on anything else, such as another condition or an ensemble, has no one curve.
 */
export function predictedCurves(input: {
  document: Pick<CampaignDocument, "hypotheses">;
  standings: Standings | null;
  measurand: Measurand;
  condition: string;
  from: number;
  to: number;
}): PlotCurve[] {
  const { document, measurand, condition, from, to } = input;
  return document.hypotheses.flatMap((hypothesis, index) => {
    const prediction = hypothesis.predictions.find((each) => each.measurand === measurand.key);
    const { expected } = prediction ?? {};
    if (expected === null || expected === undefined) return [];
    const scope = parametersOf(hypothesis, input.standings);
    const value = functionOf(String(expected), hypothesis, { scope, condition });
    if (value === null) return [];
    const points = Array.from({ length: steps + 1 }, (_, step) => {
      const x = from + ((to - from) * step) / steps;
      return { x, value: value(x) };
    }).filter((point) => Number.isFinite(point.value));
    const { key, title } = hypothesis;
    return points.length > 1 ? [{ key, title: title ?? key, index, points }] : [];
  });
}

function parametersOf({ key }: Hypothesis, standings: Standings | null): Record<string, number> {
  const standing = standings?.hypotheses.find((each) => each.key === key);
  return Object.fromEntries((standing?.parameters ?? []).map((each) => [each.key, each.mean]));
}

function functionOf(
  expected: string,
  hypothesis: Hypothesis,
  { scope, condition }: { scope: Record<string, number>; condition: string },
): ((x: number) => number) | null {
  const compiled = compileExpression(expected, {
    names: new Set([condition, ...Object.keys(scope)]),
    tables: new Map(hypothesis.tables.map((table) => [table.key, table])),
  });
  if (!compiled.ok) return null;
  return (x) => compiled.expression.evaluate({ ...scope, [condition]: x });
}
