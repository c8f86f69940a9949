import type { Hypothesis, Prediction } from "./document";
import type { HypothesisContent } from "./entries";
import { compareInstants } from "./instants";
import type { PartContent } from "./parts";
import { sortedJson } from "./sorted-json";

/** What only the ledger knows of a hypothesis. */
type Kept = {
  /** Measurands whose sealed prediction is not revealed: they are in `withheld` too. */
  sealed: string[];
  /** Since when each name that expressions use has meant what it means. */
  modelSince: Record<string, string>;
  retired: { at: string; reason: string } | null;
};
type Stored = Omit<Hypothesis, "registeredAt"> & { registeredAt: string } & Kept;

/** A hypothesis as of its entry: it and all of its predictions take the entry's time. */
export function registeredHypothesis(
  content: HypothesisContent,
  at: string,
): Stored & PartContent & { key: string } {
  const predictions = content.predictions.map((prediction) => ({
    ...prediction,
    registeredAt: at,
  }));
  const modelSince = Object.fromEntries([...definitions(content).keys()].map((name) => [name, at]));
  return { ...content, predictions, registeredAt: at, sealed: [], modelSince, retired: null };
}

/**
 * A hypothesis after an amendment. It keeps the time of its registration; each prediction that
 * says the same as before keeps its own time, and each that is new or says something else takes the
 * amendment's. A prediction also says something else when a prior, a table, an ensemble column or
 * a tolerance correlation that it hangs on has changed. What is sealed stays withheld.
 */
export function amendedHypothesis(
  before: PartContent,
  amendment: { content: HypothesisContent; at: string },
): Stored & PartContent & { key: string } {
  const old = storedHypothesis(before);
  const amended = registeredHypothesis(amendment.content, amendment.at);
  const oldPredictions = new Map(old.predictions.map((one) => [one.measurand, one]));
  const predictions = amended.predictions.map((prediction) => {
    const earlierOne = oldPredictions.get(prediction.measurand);
    const same =
      earlierOne !== undefined && substance(old, earlierOne) === substance(amended, prediction);
    return { ...prediction, registeredAt: same ? earlierOne.registeredAt : amended.registeredAt };
  });
  const { registeredAt, sealed } = old;
  const withheld = [...new Set([...amended.withheld, ...sealed])];
  const modelSince = since(old, amended);
  return { ...amended, predictions, registeredAt, withheld, sealed, modelSince };
}

/** A sealed prediction's measurand is public: the hypothesis withholds what it says of it. */
export function withSealed(before: PartContent, measurand: string): PartContent {
  const { withheld, sealed } = storedHypothesis(before);
  return {
    ...before,
    withheld: [...new Set([...withheld, measurand])],
    sealed: [...sealed, measurand],
  };
}

/**
 * A revealed prediction counts from when it was sealed, or from when the last of the priors, tables
 * and columns that it hangs on was changed, if that was later.
 */
export function withRevealed(
  before: PartContent,
  { prediction, sealedAt }: { prediction: Omit<Prediction, "registeredAt">; sealedAt: string },
): PartContent {
  const { withheld, sealed, predictions, modelSince } = storedHypothesis(before);
  const registeredAt = [...namesIn(prediction)]
    .map((name) => (Object.hasOwn(modelSince, name) ? modelSince[name]! : sealedAt))
    .reduce((latest, at) => (compareInstants(at, latest) > 0 ? at : latest), sealedAt);
  const others = (keys: string[]) => keys.filter((key) => key !== prediction.measurand);
  return {
    ...before,
    withheld: others(withheld),
    sealed: others(sealed),
    predictions: [...predictions, { ...prediction, registeredAt }],
  };
}

/** A hypothesis with what the ledger knows of it; projections of before there were seals lack that. */
export function storedHypothesis(content: PartContent): Stored & PartContent {
  return { sealed: [], modelSince: {}, retired: null, ...content } as unknown as Stored &
    PartContent;
}

type Model = Pick<Hypothesis, "parameters" | "tables" | "ensemble">;

/** What each name that expressions use means, as one text. */
function definitions({ parameters, tables, ensemble }: Model): Map<string, string> {
  return new Map([
    ...parameters.map(({ key, prior }) => [key, sortedJson(prior)] as const),
    ...tables.map(({ key, at, values }) => [key, sortedJson([at, values])] as const),
    ...Object.entries(ensemble?.columns ?? {}).map(
      ([key, column]) => [key, sortedJson([column, ensemble?.weights ?? null])] as const,
    ),
  ]);
}

function since(old: Stored, amended: Stored): Record<string, string> {
  const before = definitions(old);
  return Object.fromEntries(
    [...definitions(amended)].map(([name, meaning]) => {
      const same = before.get(name) === meaning;
      return [name, same ? (old.modelSince[name] ?? old.registeredAt) : amended.registeredAt];
    }),
  );
}

function namesIn({ expected }: Pick<Prediction, "expected">): Set<string> {
  return new Set(typeof expected === "string" ? expected.match(/[a-zA-Z]\w*/g) : []);
}

/** Everything that a prediction's numbers hang on, as one text. */
function substance(hypothesis: Stored, prediction: Prediction): string {
  const { registeredAt: _, ...said } = prediction;
  const names = namesIn(prediction);
  return sortedJson({
    said,
    model: [...definitions(hypothesis)].filter(([name]) => names.has(name)).sort(byFirst),
    correlations: hypothesis.toleranceCorrelations
      .filter(({ a, b }) => a === prediction.measurand || b === prediction.measurand)
      .map(({ a, b, coefficient }) => [[a, b].sort().join(" "), coefficient])
      .sort(byFirst),
  });
}

function byFirst(a: unknown[], b: unknown[]): number {
  return String(a[0]) < String(b[0]) ? -1 : 1;
}
