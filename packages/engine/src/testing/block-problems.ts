import {
  NORMAL,
  type BlockProblem,
  type BlockRows,
  type Evaluated,
  type LinearUnknown,
  type OuterUnknown,
} from "../block/problem";

/** What a test says of a block, the rest being as plain as can be. */
export interface BlockTerms {
  observed: readonly number[];
  variance: readonly number[];
  kind?: readonly number[];
  rows?: Partial<BlockRows>;
  linear?: readonly LinearUnknown[];
  /** Rows x linear unknowns. */
  design?: readonly (readonly number[])[];
  correlations?: BlockProblem["correlations"];
  outer?: readonly OuterUnknown[];
  /** Weights. */
  scenarios?: readonly number[];
  varying?: readonly number[];
  evaluate?: (outer: Float64Array, scenario: number, into: Evaluated) => boolean;
  outerFactor?: BlockProblem["outerFactor"];
  atFit?: BlockProblem["atFit"];
  seed?: number;
}

export function blockProblem(terms: BlockTerms): BlockProblem {
  const count = terms.observed.length;
  const { linear = [], design = [] } = terms;
  const start = new Int32Array(count + 1);
  const column: number[] = [];
  const value: number[] = [];
  for (let i = 0; i < count; i += 1) {
    for (let k = 0; k < linear.length; k += 1) {
      const one = design[i]?.[k] ?? 0;
      if (one === 0) continue;
      column.push(k);
      value.push(one);
    }
    start[i + 1] = column.length;
  }
  return {
    rows: {
      count,
      observed: Float64Array.from(terms.observed),
      kind: terms.kind ? Uint8Array.from(terms.kind) : new Uint8Array(count).fill(NORMAL),
      variance: Float64Array.from(terms.variance),
      asymmetric: null,
      eachFlat: null,
      factors: null,
      period: null,
      groups: [],
      smooth: [],
      ...terms.rows,
    },
    linear,
    design: { start, column: Int32Array.from(column), value: Float64Array.from(value) },
    correlations: terms.correlations ?? [],
    outer: terms.outer ?? [],
    scenarios: Float64Array.from(terms.scenarios ?? [1], Math.log),
    varying: terms.varying ?? [],
    evaluate:
      terms.evaluate ??
      ((_outer, _scenario, { base }) => {
        base.fill(0);
        return true;
      }),
    ...(terms.outerFactor ? { outerFactor: terms.outerFactor } : {}),
    atFit: terms.atFit ?? [],
    seed: terms.seed ?? 1,
  };
}

/** Mulberry32: numbers in [0, 1) for tests, the same ones every time. */
export function randomNumbers(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let t = Math.imul(state ^ (state >>> 15), 1 | state);
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t;
    return ((t ^ (t >>> 14)) >>> 0) / 2 ** 32;
  };
}

/** ln N(r; 0, C) by a plain Cholesky; with what `r' C^-1 r` is. */
export function denseNormal(r: readonly number[], covariance: readonly (readonly number[])[]) {
  const n = r.length;
  const lower = covariance.map((row) => [...row]);
  let ln = (-n * Math.log(2 * Math.PI)) / 2;
  const v = [...r];
  let chiSquare = 0;
  for (let j = 0; j < n; j += 1) {
    for (let k = 0; k < j; k += 1) {
      for (let i = j; i < n; i += 1) lower[i]![j]! -= lower[i]![k]! * lower[j]![k]!;
      v[j]! -= lower[j]![k]! * v[k]!;
    }
    const pivot = Math.sqrt(lower[j]![j]!);
    for (let i = j; i < n; i += 1) lower[i]![j]! /= pivot;
    v[j]! /= pivot;
    ln -= Math.log(pivot);
    chiSquare += v[j]! * v[j]!;
  }
  return { ln: ln - chiSquare / 2, chiSquare };
}
