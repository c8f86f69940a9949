import type { TriangularSystem } from "@weighhouse/numerics/triangular-system";

/** What is left of a coefficient, as a share of what it was made of, below which it is rounding. */
const ROUNDING = 64 * Number.EPSILON;
/** A pivot this many times smaller than its column is known to too few digits to be taken apart. */
const MOST_CONDITION = 1e6;

/**
 * Adds an equation of unit variance by Givens rotations. Other than `addRow` it takes what only
 * rounding leaves of a coefficient for 0: a column that is others' sum has no pivot, and its row is 0
 * throughout, so that what was put in can be taken out again.
 *
 * @param row `size + 1` long, its right-hand side last; used up
 * Accuracy: as `addRow`.
 */
export function insertRow(system: TriangularSystem, row: Float64Array): void {
  const { size, data } = system;
  const width = size + 1;
  const made = Float64Array.from(row, Math.abs);
  for (let j = 0; j < size; j += 1) {
    const below = row[j]!;
    if (Math.abs(below) <= ROUNDING * made[j]!) continue;
    const start = j * width;
    const diagonal = data[start + j]!;
    if (diagonal === 0) {
      data.set(row.subarray(j), start + j);
      return;
    }
    const whole = Math.hypot(diagonal, below);
    const c = diagonal / whole;
    const s = below / whole;
    for (let k = j; k < width; k += 1) {
      const upper = data[start + k]!;
      const lower = row[k]!;
      data[start + k] = c * upper + s * lower;
      row[k] = c * lower - s * upper;
      made[k] = Math.max(made[k]!, Math.abs(c * lower), Math.abs(s * upper));
    }
  }
  system.rss += row[size]! * row[size]!;
}

/**
 * Takes an equation of unit variance out of a triangular system by hyperbolic rotations in their
 * stable form: R' a = row, alpha^2 = 1 - |a|^2 is the share of what is known in the row's direction
 * that is left without it.
 *
 * @param row `size + 1` long, its right-hand side last; used up
 * @param left how many equations are left
 * @returns how much larger rounding errors may be after it, max(1 / alpha^2, (S + n) / (S' + n')), S
 *   the system's rss; Infinity where nothing but rounding is left: then the system is no good
 * Source: Dongarra et al., LINPACK Users' Guide (1979), 10 (dchdd); Stewart, J. Inst. Maths
 * Applics 23 (1979) 203.
 */
export function removeRow(system: TriangularSystem, row: Float64Array, left: number): number {
  const { size, data } = system;
  const width = size + 1;
  let squares = 0;
  for (let i = 0; i < size; i += 1) {
    const diagonal = data[i * width + i]!;
    if (columnSize(system, i) > MOST_CONDITION * Math.abs(diagonal) && diagonal !== 0) {
      return Infinity;
    }
    const a = diagonal === 0 ? 0 : row[i]! / diagonal;
    row[i] = a;
    squares += a * a;
    for (let k = i + 1; k < size; k += 1) row[k]! -= a * data[i * width + k]!;
  }
  const share = 1 - squares;
  if (!(share > 0)) return Infinity;
  const cosines = new Float64Array(size);
  const sines = new Float64Array(size);
  let alpha = Math.sqrt(share);
  for (let i = size - 1; i >= 0; i -= 1) {
    const whole = Math.hypot(alpha, row[i]!);
    cosines[i] = alpha / whole;
    sines[i] = row[i]! / whole;
    alpha = whole;
  }
  for (let j = 0; j < size; j += 1) {
    let above = 0;
    for (let i = j; i >= 0; i -= 1) {
      const at = i * width + j;
      const rest = cosines[i]! * above + sines[i]! * data[at]!;
      data[at] = cosines[i]! * data[at]! - sines[i]! * above;
      above = rest;
    }
  }
  let residual = row[size]!;
  for (let i = 0; i < size; i += 1) {
    const at = i * width + size;
    data[at] = (data[at]! - sines[i]! * residual) / cosines[i]!;
    residual = cosines[i]! * residual - sines[i]! * data[at];
  }
  const rss = system.rss;
  system.rss = Math.max(rss - residual * residual, 0);
  const ratio = Math.max(1 / share, (rss + left + 1) / (system.rss + left));
  return Number.isNaN(ratio) ? Infinity : ratio;
}

function columnSize({ size, data }: TriangularSystem, j: number): number {
  let squares = 0;
  for (let i = 0; i <= j; i += 1) squares += data[i * (size + 1) + j]! ** 2;
  return Math.sqrt(squares);
}
