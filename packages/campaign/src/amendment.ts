import type { Hypothesis, Prediction } from "./document";

type PartContent = Record<string, unknown>;

/**
 * A hypothesis after an amendment. It keeps the time of its registration; each prediction that
 * says the same as before keeps its own time, and each that is new or says something else takes the
 * amendment's. A prediction also says something else when a prior, a table, an ensemble column or
 * a tolerance correlation that it hangs on has changed.
 */
export function amendedHypothesis(before: PartContent, after: PartContent): PartContent {
  const old = before as Hypothesis & PartContent;
  const amended = after as Hypothesis & PartContent;
  const oldPredictions = new Map(old.predictions.map((one) => [one.measurand, one]));
  const predictions = amended.predictions.map((prediction) => {
    const earlierOne = oldPredictions.get(prediction.measurand);
    const same =
      earlierOne !== undefined && substance(old, earlierOne) === substance(amended, prediction);
    return { ...prediction, registeredAt: same ? earlierOne.registeredAt : amended.registeredAt };
  });
  return { ...amended, predictions, registeredAt: old.registeredAt };
}

/** Everything that a prediction's numbers hang on, as one text. */
function substance(hypothesis: Hypothesis, prediction: Prediction): string {
  const { registeredAt: _, ...said } = prediction;
  const names = new Set(
    typeof prediction.expected === "string" ? prediction.expected.match(/[a-zA-Z]\w*/g) : [],
  );
  const { ensemble, parameters, tables, toleranceCorrelations } = hypothesis;
  const columns = Object.entries(ensemble?.columns ?? {}).filter(([name]) => names.has(name));
  return inOrder({
    said,
    priors: parameters
      .filter((one) => names.has(one.key))
      .map((one) => [one.key, one.prior])
      .sort(byFirst),
    tables: tables
      .filter((one) => names.has(one.key))
      .map((one) => [one.key, one.at, one.values])
      .sort(byFirst),
    columns: columns.sort(byFirst),
    weights: columns.length > 0 ? ensemble?.weights : null,
    correlations: toleranceCorrelations
      .filter(({ a, b }) => a === prediction.measurand || b === prediction.measurand)
      .map(({ a, b, coefficient }) => [[a, b].sort().join(" "), coefficient])
      .sort(byFirst),
  });
}

function byFirst(a: unknown[], b: unknown[]): number {
  return String(a[0]) < String(b[0]) ? -1 : 1;
}

/** JSON with sorted members, so that the order in which somebody wrote them says nothing. */
function inOrder(value: unknown): string {
  return JSON.stringify(value, (_name, inner: unknown) =>
    inner !== null && typeof inner === "object" && !Array.isArray(inner)
      ? Object.fromEntries(Object.entries(inner).sort(byFirst))
      : inner,
  );
}
