import { LN_SQRT_2PI } from "@weighhouse/numerics/normal";
import { convolved } from "./convolution";
import {
  ASYMMETRIC,
  EACH_FLAT,
  NORMAL,
  type BlockProblem,
  type BlockRows,
  type Factor,
} from "./problem";

/**
 * The variance of a reading x with uncertainties plus and minus, linear in the true value and
 * clamped to the squares of the two,
 *
 *   V = plus minus + (plus - minus) (mu - x),   min^2 <= V <= max^2
 *
 * It is plus^2 at x + plus and minus^2 at x - minus, where the clamps meet it.
 * Source: Barlow, arXiv:physics/0406120, section 4.2.
 *
 * @param distance mu - x
 */
export function asymmetricVariance(distance: number, plus: number, minus: number): number {
  if (distance >= plus) return plus * plus;
  if (distance <= -minus) return minus * minus;
  return plus * minus + (plus - minus) * distance;
}

/** ln of sqrt(V) 2 / (plus + minus): what a normal density of variance V is multiplied by. */
export function asymmetryFactor(variance: number, plus: number, minus: number): number {
  return Math.log((2 * Math.sqrt(variance)) / (plus + minus));
}

/**
 * L(mu) = exp(-(mu - x)^2 / 2V(mu)) 2 / (sqrt(2 pi) (plus + minus)), seen through the extra
 * variance: mu is what was there to be read, with scatter and all. In chi-square it is
 * (x - mu) / sqrt(V(mu)), the least over what the extra variance may have added.
 */
export function asymmetricFactor(rows: BlockRows, i: number): Factor {
  const x = rows.observed[i]!;
  const plus = rows.asymmetric!.plus[i]!;
  const minus = rows.asymmetric!.minus[i]!;
  const extra = rows.variance[i]!;
  const height = Math.log(2 / (plus + minus)) - LN_SQRT_2PI;
  const factor: Factor = {
    ln: (mu) => height - (mu - x) ** 2 / (2 * asymmetricVariance(mu - x, plus, minus)),
    centre: x,
    scale: Math.max(plus, minus),
    breaks: [x - minus, x + plus],
    residual: (mu) => (x - mu) / Math.sqrt(asymmetricVariance(mu - x, plus, minus)),
    box: null,
  };
  return extra > 0 ? convolved(factor, extra) : factor;
}

/**
 * Whether the block's asymmetric rows are taken as they are: it has one unknown in all (an outer
 * one, a flat one, or normal ones that enter as one sum), or none, and then each row stands alone.
 * Else they are normal with the variance at the best fit.
 */
export function allowsExactAsymmetry(problem: BlockProblem): boolean {
  const { rows, linear, outer, atFit, varying } = problem;
  const asymmetric = indicesOf(rows.kind, ASYMMETRIC);
  if (asymmetric.length === 0) return false;
  const own = new Set(asymmetric);
  const tied = [...rows.groups, ...rows.smooth].some(({ rows: some }) =>
    some.some((i) => own.has(i)),
  );
  if (tied || rows.smooth.length > 0 || atFit.length > 0 || varying.length > 0) return false;
  if (linear.length + outer.length === 0) return true;
  const alone = rows.count === 1;
  const shared = asymmetric.some((i) => rows.variance[i]! > 0) || rows.kind.includes(EACH_FLAT);
  if (outer.length > 0) return outer.length === 1 && linear.length === 0 && !shared;
  const normal = linear.every(({ kind }) => kind === "normal");
  if (shared) return alone && normal;
  return linear.length === 1 || (normal && isOneSum(problem));
}

/**
 * Whether the columns of all linear unknowns are multiples of one another; but for those that only
 * one row has, and that a normal one, of whose noise they are a part.
 */
function isOneSum(problem: BlockProblem): boolean {
  const { rows, design, linear } = problem;
  const own = noiseOfOneRow(problem);
  let first: Float64Array | null = null;
  let largest = 0;
  const row = new Float64Array(linear.length);
  for (let i = 0; i < rows.count; i += 1) {
    row.fill(0);
    for (let e = design.start[i]!; e < design.start[i + 1]!; e += 1) {
      if (!own.has(design.column[e]!)) row[design.column[e]!]! += design.value[e]!;
    }
    if (first === null) {
      if (row.every((value) => value === 0)) continue;
      first = row.slice();
      first.forEach(
        (value, k) => (largest = Math.abs(value) > Math.abs(first![largest]!) ? k : largest),
      );
      continue;
    }
    // Rows that are multiples of one row: then so are the columns.
    const share = row[largest]! / first[largest]!;
    const same = row.every(
      (value, k) => Math.abs(value - share * first![k]!) <= 1e-14 * Math.abs(value),
    );
    if (!same) return false;
  }
  return true;
}

function noiseOfOneRow({ rows, design, linear }: BlockProblem): Set<number> {
  const touched = linear.map(() => new Set<number>());
  for (let i = 0; i < rows.count; i += 1) {
    for (let e = design.start[i]!; e < design.start[i + 1]!; e += 1) {
      touched[design.column[e]!]!.add(i);
    }
  }
  const own = new Set<number>();
  touched.forEach((some, k) => {
    const [only] = some;
    if (some.size === 1 && rows.kind[only!] === NORMAL) own.add(k);
  });
  return own;
}

function indicesOf(kinds: Uint8Array, kind: number): number[] {
  const found: number[] = [];
  for (let i = 0; i < kinds.length; i += 1) if (kinds[i] === kind) found.push(i);
  return found;
}
