import type { Prior } from "@weighhouse/campaign/document";
import { gammaFromMoments, gammaQuantile } from "@weighhouse/numerics/gamma-distribution";
import type { RandomSource } from "@weighhouse/numerics/random-source";
import { splitNormalQuantile } from "@weighhouse/numerics/split-normal";
import { choleskyFactor } from "@weighhouse/numerics/symmetric-cholesky";
import type { Frame, HypothesisFrame, PredictionFrame, Role, ToleranceFrame } from "../frame";
import { ownSlots } from "../frame";
import { toScoringSpace } from "../scoring-space";

/** One measurand's truth in one run, as a function of the conditions. */
export type Truth =
  /** `level`: what a relative error is a share of; `value`: with tolerance and scatter. Scoring space. */
  | { kind: "value"; at: (conditions: Conditions) => { level: number; value: number } }
  | { kind: "event"; occurred: boolean }
  | { kind: "rate"; rate: number };

export type Conditions = Readonly<Record<string, number>>;

/**
 * Draws the truth of every measurand from what a hypothesis says: its parameters from their priors,
 * a row of its ensemble, its theory errors; where it is silent, from the references.
 *
 * @param truth null: silent on everything
 */
export function drawTruth(
  frame: Frame,
  truth: HypothesisFrame | null,
  random: RandomSource,
): (measurand: number) => Truth {
  const slots = truth === null ? new Float64Array(0) : drawSlots(truth, random);
  const offsets = truth === null ? [] : drawOffsets(truth, random);
  const drawn = new Map<number, Truth>();
  const truthOf = (measurand: number): Truth => {
    const there = drawn.get(measurand);
    if (there !== undefined) return there;
    const place = truth?.predictions.findIndex((one) => one.measurand === measurand) ?? -1;
    const prediction = place < 0 ? null : truth!.predictions[place]!;
    const speaks = prediction !== null && isMet(prediction, truthOf);
    const own: Truth = speaks
      ? drawPredicted({ frame, prediction, slots, offset: offsets[place]!, random })
      : drawRole({ frame, measurand, role: frame.measurands[measurand]!.roles[0]!, random });
    drawn.set(measurand, own);
    return own;
  };
  return truthOf;
}

/** A conditional prediction speaks where its event turns out so; else the hypothesis is silent. */
function isMet({ given }: PredictionFrame, truthOf: (measurand: number) => Truth): boolean {
  if (given === null) return true;
  const event = truthOf(given.measurand);
  return event.kind === "event" && event.occurred === given.occurred;
}

function drawSlots({ parameters, ensemble }: HypothesisFrame, random: RandomSource): Float64Array {
  const slots = new Float64Array(parameters.length + (ensemble?.columns.length ?? 0));
  parameters.forEach(({ prior }, i) => (slots[i] = drawPrior(prior, random)));
  if (ensemble === null) return slots;
  let left = random.uniform();
  let row = 0;
  while (row < ensemble.logWeights.length - 1) {
    left -= Math.exp(ensemble.logWeights[row]!);
    if (left < 0) break;
    row += 1;
  }
  ensemble.columns.forEach((column, i) => (slots[parameters.length + i] = column[row]!));
  return slots;
}

function drawPrior(prior: Prior, random: RandomSource): number {
  switch (prior.family) {
    case "normal":
      return prior.mean + prior.sd * random.normal();
    case "lognormal":
      return prior.median * 10 ** (prior.sdLog10 * random.normal());
    case "uniform":
      return prior.lower + (prior.upper - prior.lower) * random.uniform();
    case "loguniform":
      return prior.lower * (prior.upper / prior.lower) ** random.uniform();
    case "halfnormal":
      return prior.sd * Math.abs(random.normal());
    case "fixed":
      return prior.value;
  }
}

/** A standard normal for each prediction's common offset, correlated as the tolerances are. */
function drawOffsets(
  { predictions, toleranceCorrelations }: HypothesisFrame,
  random: RandomSource,
): number[] {
  const size = predictions.length;
  const independent = predictions.map(() => random.normal());
  if (toleranceCorrelations.length === 0) return independent;
  const matrix = new Float64Array(size * size);
  for (let i = 0; i < size; i += 1) matrix[i * size + i] = 1;
  for (const { a, b, coefficient } of toleranceCorrelations) {
    matrix[a * size + b] = coefficient;
    matrix[b * size + a] = coefficient;
  }
  const found = choleskyFactor(matrix, size);
  // A reader of documents refuses correlations that don't fit together.
  if (!found.ok) return independent;
  const { lower } = found.factor;
  return independent.map((_, i) =>
    independent.reduce((sum, z, k) => sum + lower[i * size + k]! * z, 0),
  );
}

interface Predicted {
  frame: Frame;
  prediction: PredictionFrame;
  slots: Float64Array;
  offset: number;
  random: RandomSource;
}

function drawPredicted({ frame, prediction, slots, offset, random }: Predicted): Truth {
  const { measurand, tolerance, expectation } = prediction;
  const own = frame.measurands[measurand]!;
  if (tolerance.family === "event") {
    return { kind: "event", occurred: random.uniform() < tolerance.probability };
  }
  if (tolerance.family === "gamma") {
    const gamma = gammaFromMoments(tolerance.mean, tolerance.sd);
    return { kind: "rate", rate: gammaQuantile(random.uniform(), gamma) };
  }
  const natural = (conditions: Conditions): number => {
    if (expectation === null) return prediction.natural!;
    const values = new Float64Array(expectation.slots.length);
    values.set(slots);
    const from = ownSlots(frame.hypotheses[prediction.hypothesis]!);
    if (own.curve) own.conditions.forEach((key, i) => (values[from + i] = conditions[key] ?? NaN));
    return expectation.evaluate(values);
  };
  if (own.scale === "count") return { kind: "rate", rate: natural({}) };
  const scatter = Math.sqrt(own.scatterVariance);
  const offsetAt = drawTolerance(tolerance, { own, offset, random });
  return {
    kind: "value",
    at: (conditions) => {
      const bounds = "lower" in tolerance;
      const expected = bounds ? 0 : natural(conditions);
      const middle = bounds ? 0 : toScoringSpace(expected, own.scale);
      const value = middle + offsetAt(conditions, expected);
      return { level: bounds ? value : expected, value: value + scatter * random.normal() };
    },
  };
}

/** What a tolerance adds at some conditions; of one with bounds, the value itself. */
function drawTolerance(
  tolerance: ToleranceFrame,
  {
    own,
    offset,
    random,
  }: { own: Frame["measurands"][number]; offset: number; random: RandomSource },
): (conditions: Conditions, expected: number) => number {
  switch (tolerance.family) {
    case "normal": {
      const sd = (expected: number) =>
        tolerance.relative ? tolerance.sd * Math.abs(expected) : tolerance.sd;
      if (tolerance.sharing === "smooth") {
        const key = own.conditions[tolerance.condition]!;
        const process = smoothProcess(tolerance.length, random);
        return (conditions, expected) => sd(expected) * process(conditions[key] ?? NaN);
      }
      const common = tolerance.sharing === "common";
      return (_, expected) => sd(expected) * (common ? offset : random.normal());
    }
    case "interval":
    case "atMost":
    case "atLeast": {
      const draw = () => tolerance.lower + tolerance.width * random.uniform();
      if (tolerance.sharing === "each") return draw;
      const common = draw();
      return () => common;
    }
    case "splitNormal": {
      const { plus, minus } = tolerance;
      const common = splitNormalQuantile(random.uniform(), { mode: 0, plus, minus });
      return () => common;
    }
    default:
      return () => 0;
  }
}

/**
 * A standard Ornstein-Uhlenbeck process drawn where it is asked for: between its nearest known
 * neighbours, on which alone (Markov) it hangs.
 */
function smoothProcess(length: number, random: RandomSource): (x: number) => number {
  const known: { x: number; z: number }[] = [];
  return (x) => {
    const next = known.findIndex((one) => one.x >= x);
    const after = next < 0 ? null : known[next]!;
    if (after?.x === x) return after.z;
    const before = next < 0 ? (known.at(-1) ?? null) : (known[next - 1] ?? null);
    const a = before === null ? 0 : Math.exp((before.x - x) / length);
    const b = after === null ? 0 : Math.exp((x - after.x) / length);
    // Conditional of a bivariate normal with correlations a, b and a b between the two.
    const norm = 1 - a * a * b * b;
    const [weightA, weightB] = [(a * (1 - b * b)) / norm, (b * (1 - a * a)) / norm];
    const mean = weightA * (before?.z ?? 0) + weightB * (after?.z ?? 0);
    const variance = Math.max(1 - weightA * a - weightB * b, 0);
    const z = mean + Math.sqrt(variance) * random.normal();
    known.splice(next < 0 ? known.length : next, 0, { x, z });
    return z;
  };
}

interface Referred {
  frame: Frame;
  measurand: number;
  role: Role;
  random: RandomSource;
}

/** Of a reference; a level and a polynomial are common to all readings, its scatter isn't. */
function drawRole({ frame, measurand, role, random }: Referred): Truth {
  const own = frame.measurands[measurand]!;
  switch (role.kind) {
    case "event":
      return { kind: "event", occurred: random.uniform() < role.probability };
    case "rate":
      return { kind: "rate", rate: drawRate(role, random) };
    case "predicted":
      throw new TypeError("a reference is no prediction");
    default: {
      const levelAt = drawLevel(role, own.conditions, random);
      const scatter = Math.sqrt(own.scatterVariance + own.noises[role.noise]!);
      return {
        kind: "value",
        at: (conditions) => {
          const level = levelAt(conditions);
          return { level, value: level + scatter * random.normal() };
        },
      };
    }
  }
}

function drawRate(role: Extract<Role, { kind: "rate" }>, random: RandomSource): number {
  if (role.family === "exact") return role.rate;
  if (role.family === "uniform") return role.lower + (role.upper - role.lower) * random.uniform();
  return gammaQuantile(random.uniform(), gammaFromMoments(role.mean, role.sd));
}

function drawLevel(
  role: Extract<Role, { kind: "normal" | "uniform" | "polynomial" }>,
  keys: readonly string[],
  random: RandomSource,
): (conditions: Conditions) => number {
  if (role.kind === "normal") {
    const level = role.mean + role.sd * random.normal();
    return () => level;
  }
  if (role.kind === "uniform") {
    const level = role.lower + role.width * random.uniform();
    return () => level;
  }
  const { condition, lower, upper, degree, centre, sd } = role;
  const coefficients = Array.from({ length: degree + 1 }, () => sd * random.normal());
  return (conditions) => {
    const x = (2 * (conditions[keys[condition]!] ?? NaN) - lower - upper) / (upper - lower);
    let [before, now] = [0, 1];
    let sum = centre;
    // Bonnet's recursion: (n + 1) P_(n+1) = (2 n + 1) x P_n - n P_(n-1).
    coefficients.forEach((coefficient, n) => {
      sum += coefficient * now;
      [before, now] = [now, ((2 * n + 1) * x * now - n * before) / (n + 1)];
    });
    return sum;
  };
}
