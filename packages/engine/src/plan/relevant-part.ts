import type { CampaignDocument } from "@weighhouse/campaign/document";

/**
 * The campaign with only those measurements that can bear on readings of some measurands: what is
 * joined to them by shared errors, by a hypothesis's parameters, ensemble or correlated
 * tolerances, by conditions on an event, by correlations or derived values. For every hypothesis
 * the ratio of its evidence with and without such a reading is that of the whole campaign.
 */
export function relevantPart(
  document: CampaignDocument,
  measurands: readonly string[],
  errors: readonly string[],
): CampaignDocument {
  const groups = new Groups();
  for (const { measurand, shared, setAside } of document.measurements) {
    if (setAside !== null) continue;
    for (const { error } of shared) groups.join(`measurand ${measurand}`, `error ${error}`);
  }
  for (const measurand of measurands) {
    for (const error of errors) groups.join(`measurand ${measurand}`, `error ${error}`);
  }
  for (const { from } of document.derived) {
    const inputs = Object.values(from);
    for (const input of inputs) groups.join(`measurand ${input}`, `measurand ${inputs[0]}`);
  }
  joinByHypotheses(document, groups);
  joinByCorrelations(document, groups);
  const wanted = new Set(measurands.map((key) => groups.rootOf(`measurand ${key}`)));
  const measurements = document.measurements.filter(({ measurand }) =>
    wanted.has(groups.rootOf(`measurand ${measurand}`)),
  );
  const ids = new Set(measurements.map(({ id }) => id));
  const correlations = document.correlations.filter(({ a, b }) => ids.has(a) && ids.has(b));
  return { ...document, measurements, correlations };
}

function joinByHypotheses({ hypotheses, derived }: CampaignDocument, groups: Groups): void {
  const inputOf = new Map(derived.map(({ key, from }) => [key, Object.values(from)[0]]));
  const node = (key: string) => `measurand ${inputOf.get(key) ?? key}`;
  for (const { parameters, ensemble, predictions, toleranceCorrelations } of hypotheses) {
    const together = parameters.length > 0 || ensemble !== null;
    for (const { measurand, given } of predictions) {
      if (together) groups.join(node(measurand), node(predictions[0]!.measurand));
      if (given !== null) groups.join(node(measurand), node(given.measurand));
    }
    for (const { a, b } of toleranceCorrelations) groups.join(node(a), node(b));
  }
}

function joinByCorrelations({ correlations, measurements }: CampaignDocument, groups: Groups) {
  if (correlations.length === 0) return;
  const measurandOf = new Map(measurements.map(({ id, measurand }) => [id, measurand]));
  for (const { a, b } of correlations) {
    groups.join(`measurand ${measurandOf.get(a)}`, `measurand ${measurandOf.get(b)}`);
  }
}

/** Names that belong together: a forest with each name's parent. */
class Groups {
  readonly #parents = new Map<string, string>();

  rootOf(name: string): string {
    let root = name;
    for (let up = this.#parents.get(root); up !== undefined; up = this.#parents.get(root)) {
      root = up;
    }
    return root;
  }

  join(a: string, b: string): void {
    const [first, second] = [this.rootOf(a), this.rootOf(b)];
    if (first !== second) this.#parents.set(first, second);
  }
}
