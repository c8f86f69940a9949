import type {
  CampaignDocument,
  Measurement,
  Prediction,
  Reference,
} from "@weighhouse/campaign/document";

/**
 * The plain computation that the engine is checked against: one dense covariance matrix over all
 * measurements, its Cholesky factor, and flat levels by brute-force quadrature. Shares no step
 * with the engine. Values are subtracted before anything is squared, which is exact for doubles
 * this near to one another, so that the matrix is the only source of rounding.
 */
export interface DenseScore {
  lnEvidence: number;
  chiSquare: number | null;
}

const LN_2PI = Math.log(2 * Math.PI);

interface Datum {
  measurand: string;
  y: number;
  variance: number;
  loads: Map<string, number>;
}

/** What is said of each measurand: a prediction, or null for its reference. */
export type Said = Map<string, Prediction | null>;

export function denseScore(document: CampaignDocument, said: Said): DenseScore {
  const data = document.measurements
    .filter((one) => one.setAside === null && said.has(one.measurand))
    .map((one) => datum(document, one));
  const spoken = data.filter((one) => said.get(one.measurand) !== null);
  const compared = spoken.length === 0 ? null : gaussian(document, spoken, said);
  return {
    lnEvidence: logEvidence(document, data, said),
    chiSquare: compared === null ? null : compared.quadratic,
  };
}

/** Generalised least squares over one measurand, as the matrix formulas stand. */
export function denseCombination(document: CampaignDocument, measurand: string) {
  const data = document.measurements
    .filter((one) => one.setAside === null && one.measurand === measurand)
    .map((one) => datum(document, one));
  if (data.length === 0) return null;
  const factor = cholesky(
    covariance(
      data,
      () => 0,
      () => 0,
    ),
  );
  const centre = data[0]!.y;
  const ones = forward(
    factor,
    data.map(() => 1),
  );
  const rest = forward(
    factor,
    data.map(({ y }) => y - centre),
  );
  const information = dot(ones, ones);
  const shift = dot(ones, rest) / information;
  const residual = rest.map((value, i) => value - shift * ones[i]!);
  return {
    value: centre + shift,
    sd: 1 / Math.sqrt(information),
    chiSquare: dot(residual, residual),
  };
}

function scaleOf(document: CampaignDocument, key: string) {
  const measurand = document.measurands.find((one) => one.key === key)!;
  const observable = document.observables.find((one) => one.key === measurand.observable)!;
  return { measurand, log10: observable.scale === "log10" };
}

function datum(document: CampaignDocument, one: Measurement): Datum {
  const { measurand, log10 } = scaleOf(document, one.measurand);
  const value = one.value!;
  const sd = log10 ? (one.sdDex ?? one.sd! / (value * Math.LN10)) : one.sd!;
  const loads = new Map<string, number>();
  for (const { error: key, coefficient } of one.shared) {
    const error = document.sharedErrors.find((other) => other.key === key)!;
    const draw = error.per === "batch" ? `${key} ${one.batch}` : key;
    loads.set(draw, (loads.get(draw) ?? 0) + coefficient * error.sd);
  }
  return {
    measurand: one.measurand,
    y: log10 ? Math.log10(value) : value,
    variance: sd * sd + measurand.scatter * measurand.scatter,
    loads,
  };
}

function covariance(
  data: Datum[],
  common: (measurand: string) => number,
  each: (measurand: string) => number,
): number[][] {
  return data.map((a, i) =>
    data.map((b, j) => {
      let sum = a.measurand === b.measurand ? common(a.measurand) : 0;
      for (const [draw, load] of a.loads) sum += load * (b.loads.get(draw) ?? 0);
      return i === j ? sum + a.variance + each(a.measurand) : sum;
    }),
  );
}

interface Model {
  /** null: flat between the bounds. */
  mean: number | null;
  common: number;
  each: number;
  lower: number;
  upper: number;
}

function modelOf(document: CampaignDocument, key: string, prediction: Prediction | null): Model {
  const { measurand, log10 } = scaleOf(document, key);
  const scored = (value: number) => (log10 ? Math.log10(value) : value);
  if (prediction === null) return modelOfReference(measurand.reference!, scored);
  const natural = prediction.expected as number;
  const { tolerance } = prediction;
  let sd = 0;
  if (tolerance?.family === "normal") {
    sd = tolerance.sd;
    if (tolerance.relative) sd = log10 ? sd / Math.LN10 : sd * Math.abs(natural);
  }
  const each = tolerance?.sharing === "each";
  return {
    mean: scored(natural),
    common: each ? 0 : sd * sd,
    each: each ? sd * sd : 0,
    lower: 0,
    upper: 0,
  };
}

function modelOfReference(reference: Reference, scored: (value: number) => number): Model {
  const each = reference.scatter * reference.scatter;
  if (reference.family === "normal") {
    const common = reference.sd * reference.sd;
    return { mean: scored(reference.mean), common, each, lower: 0, upper: 0 };
  }
  if (reference.family !== "uniform") throw new Error("not in the plain computation");
  const [lower, upper] = [scored(reference.lower), scored(reference.upper)];
  return { mean: null, common: 0, each, lower, upper };
}

function gaussian(document: CampaignDocument, data: Datum[], said: Said) {
  const models = new Map(
    [...said].map(([key, prediction]) => [key, modelOf(document, key, prediction)]),
  );
  const factor = cholesky(
    covariance(
      data,
      (key) => models.get(key)!.common,
      (key) => models.get(key)!.each,
    ),
  );
  const centres = new Map<string, number>();
  for (const { measurand, y } of data) {
    if (!centres.has(measurand)) centres.set(measurand, models.get(measurand)!.mean ?? y);
  }
  const residual = forward(
    factor,
    data.map(({ measurand, y }) => y - centres.get(measurand)!),
  );
  let logDeterminant = 0;
  factor.forEach((row, i) => (logDeterminant += 2 * Math.log(row[i]!)));
  return { models, factor, centres, residual, logDeterminant, quadratic: dot(residual, residual) };
}

function logEvidence(document: CampaignDocument, data: Datum[], said: Said): number {
  if (data.length === 0) return 0;
  const { models, factor, centres, residual, logDeterminant } = gaussian(document, data, said);
  const flats = [...new Set(data.map(({ measurand }) => measurand))].filter(
    (key) => models.get(key)!.mean === null,
  );
  const design = flats.map((key) =>
    forward(
      factor,
      data.map(({ measurand }) => (measurand === key ? 1 : 0)),
    ),
  );
  const information = design.map((a) => design.map((b) => dot(a, b)));
  const right = design.map((a) => dot(a, residual));
  const upper = flats.length > 0 ? cholesky(information) : [];
  const half = forward(upper, right);
  const best = backward(upper, half);
  // What no level can explain, by the residual itself and not by a difference of squares.
  const left = residual.map((value, i) =>
    design.reduce((rest, column, k) => rest - column[i]! * best[k]!, value),
  );
  let ln = -(data.length * LN_2PI + logDeterminant + dot(left, left)) / 2;
  const bounds = flats.map((key) => {
    const { lower, upper } = models.get(key)!;
    return { lower: lower - centres.get(key)!, upper: upper - centres.get(key)! };
  });
  for (const { lower, upper } of bounds) ln -= Math.log(upper - lower);
  return flats.length > 0 ? ln + logBox({ factor: upper, best, bounds }) : ln;
}

/**
 * ln of the integral of exp(-|L'(t - best)|^2 / 2) over the box, the last level outermost. Each
 * level is integrated where it counts, in panels of 20 Gauss-Legendre points by bisection on
 * Legendre's polynomial.
 */
function logBox({
  factor,
  best,
  bounds,
}: {
  factor: number[][];
  best: number[];
  bounds: { lower: number; upper: number }[];
}): number {
  const size = best.length;
  const t = best.map(() => 0);
  const integrate = (i: number): number => {
    // Row i of L': L_ii (t_i - best_i) + sum over later levels.
    let shift = 0;
    for (let k = i + 1; k < size; k += 1) shift += factor[k]![i]! * (t[k]! - best[k]!);
    const diagonal = factor[i]![i]!;
    const middle = best[i]! - shift / diagonal;
    const { lower, upper } = bounds[i]!;
    const nearest = Math.min(Math.max(middle, lower), upper);
    const reach = 14 / diagonal;
    // Far outside, the integrand falls within 1 / (distance in sd) of the bound.
    const from = Math.max(lower, middle > upper ? upper - 3 * reach : nearest - reach);
    const to = Math.min(upper, middle < lower ? lower + 3 * reach : nearest + reach);
    const peak = (diagonal * (nearest - middle)) ** 2 / 2;
    const logs: number[] = [];
    const panels = i === 0 ? 14 : 60;
    const width = (to - from) / panels;
    for (let panel = 0; panel < panels; panel += 1) {
      for (const { x, w } of legendre20()) {
        const value = from + width * (panel + (1 + x) / 2);
        t[i] = value;
        const inner = i === 0 ? 0 : integrate(i - 1);
        const own = (diagonal * (value - middle)) ** 2 / 2;
        logs.push(Math.log((w * width) / 2) + inner - own + peak);
      }
    }
    const largest = Math.max(...logs);
    let sum = 0;
    for (const log of logs) sum += Math.exp(log - largest);
    return largest + Math.log(sum) - peak;
  };
  return integrate(size - 1);
}

let nodes: { x: number; w: number }[] | null = null;

export function legendre20(): { x: number; w: number }[] {
  if (nodes !== null) return nodes;
  const n = 20;
  nodes = Array.from({ length: n }, (_, k) => {
    let x = Math.cos((Math.PI * (k + 0.75)) / (n + 0.5));
    let slope = 1;
    for (let step = 0; step < 50; step += 1) {
      let [before, now] = [1, x];
      for (let j = 2; j <= n; j += 1) {
        [before, now] = [now, ((2 * j - 1) * x * now - (j - 1) * before) / j];
      }
      slope = (n * (x * now - before)) / (x * x - 1);
      x -= now / slope;
    }
    return { x, w: 2 / ((1 - x * x) * slope * slope) };
  });
  return nodes;
}

export function cholesky(matrix: number[][]): number[][] {
  const factor = matrix.map((row) => row.map(() => 0));
  matrix.forEach((row, i) => {
    for (let j = 0; j <= i; j += 1) {
      let sum = row[j]!;
      for (let k = 0; k < j; k += 1) sum -= factor[i]![k]! * factor[j]![k]!;
      factor[i]![j] = i === j ? Math.sqrt(sum) : sum / factor[j]![j]!;
    }
  });
  return factor;
}

export function forward(factor: number[][], right: number[]): number[] {
  const solved: number[] = [];
  right.forEach((value, i) => {
    let sum = value;
    for (let k = 0; k < i; k += 1) sum -= factor[i]![k]! * solved[k]!;
    solved.push(sum / factor[i]![i]!);
  });
  return solved;
}

function backward(factor: number[][], right: number[]): number[] {
  const solved = right.slice();
  for (let i = right.length - 1; i >= 0; i -= 1) {
    for (let k = i + 1; k < right.length; k += 1) solved[i]! -= factor[k]![i]! * solved[k]!;
    solved[i]! /= factor[i]![i]!;
  }
  return solved;
}

export function dot(a: number[], b: number[]): number {
  let sum = 0;
  for (let i = 0; i < a.length; i += 1) sum += a[i]! * b[i]!;
  return sum;
}
