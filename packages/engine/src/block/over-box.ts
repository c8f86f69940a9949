import type { Box, LogIntegral } from "@weighhouse/numerics/box";
import { logBoxIntegral } from "@weighhouse/numerics/box-integral";
import { LN_SQRT_2PI, normalCdf } from "@weighhouse/numerics/normal";
import {
  addRow,
  createSystem,
  logDiagonal,
  type TriangularSystem,
} from "@weighhouse/numerics/triangular-system";

/** Bounds may be let go where all of them together cut off less than this share of the integral. */
const NEGLIGIBLE_SHARE = 1e-13;
const LEAST_SHARE = 1e-280;

export type Bounds = readonly { lower: number; upper: number; width: number }[];

/**
 * Another way to the integral with the first `free` unknowns of `order` unbounded, over what
 * couples them; null where there is none that is shorter.
 */
export type Coupled = (order: readonly number[], free: number) => LogIntegral | null;

/**
 * ln of the integral of exp(-|R t - q|^2 / 2) over a box, bounds infinite or not.
 *
 * One unknown is closed-form. Of more, bounds that cut off nothing that counts are let go, as far as
 * the answer allows, checked against the answer itself; what is free then is integrated in closed
 * form, two or three that are left by nested quadrature, more on a lattice or as `coupled` does.
 *
 * @param system no diagonal of 0 where there is more than one unknown
 * Accuracy: bounds let go change less than 1e-13 of the integral; what is left as box-integral.ts.
 */
export function lnOverBox(
  system: TriangularSystem,
  bounds: Bounds,
  coupled: Coupled = () => null,
): LogIntegral {
  if (system.size === 1) return logBoxIntegral(system, boxOf(bounds));
  const cutOff = sharesOutside(system, bounds);
  const order = cutOff.map((_, i) => i).sort((a, b) => cutOff[a]! - cutOff[b]! || a - b);
  const whole = system.size * LN_SQRT_2PI - logDiagonal(system, 0, system.size);
  for (let share = 1; ;) {
    let free = 0;
    let lost = 0;
    for (const i of share > 0 ? order : []) {
      if (lost + cutOff[i]! > NEGLIGIBLE_SHARE * share) break;
      lost += cutOff[i]!;
      free += 1;
    }
    const integral = coupled(order, free) ?? bounded(system, { bounds, order, free });
    const found = Math.exp(integral.ln - whole);
    // Below the smallest doubles the shares that are lost can't be told from nothing.
    const told = found > LEAST_SHARE;
    if (free === 0 || (told && lost <= NEGLIGIBLE_SHARE * found)) return integral;
    // The bounds that are kept leave less than was thought, so that more of the others count.
    share = told ? Math.min(found, share / 2) : 0;
  }
}

/** For each flat unknown, the probability outside its bounds if none had any. */
export function sharesOutside(system: TriangularSystem, bounds: Bounds): number[] {
  const { size, data } = system;
  const width = size + 1;
  const mean = new Float64Array(size);
  const inverse = new Float64Array(size * size);
  for (let i = size - 1; i >= 0; i -= 1) {
    const diagonal = data[i * width + i]!;
    let rest = data[i * width + size]!;
    for (let k = i + 1; k < size; k += 1) rest -= data[i * width + k]! * mean[k]!;
    mean[i] = rest / diagonal;
    for (let j = i; j < size; j += 1) {
      let sum = i === j ? 1 : 0;
      for (let k = i + 1; k <= j; k += 1) sum -= data[i * width + k]! * inverse[k * size + j]!;
      inverse[i * size + j] = sum / diagonal;
    }
  }
  return bounds.map(({ lower, upper }, i) => {
    let variance = 0;
    for (let j = i; j < size; j += 1) variance += inverse[i * size + j]! ** 2;
    const sd = Math.sqrt(variance);
    return normalCdf((lower - mean[i]!) / sd) + normalCdf((mean[i]! - upper) / sd);
  });
}

/** The integral with the first `free` unknowns of `order` unbounded. */
function bounded(
  system: TriangularSystem,
  { bounds, order, free }: { bounds: Bounds; order: readonly number[]; free: number },
): LogIntegral {
  const sorted = reordered(system, order);
  const scale = free * LN_SQRT_2PI - logDiagonal(sorted, 0, free);
  if (free === order.length) return { ln: scale, error: 0 };
  const box = boxOf(order.slice(free).map((i) => bounds[i]!));
  const integral = logBoxIntegral(lastUnknowns(sorted, free), box);
  return { ln: scale + integral.ln, error: integral.error };
}

export function boxOf(bounds: Bounds): Required<Box> {
  return {
    lower: Float64Array.from(bounds, ({ lower }) => lower),
    upper: Float64Array.from(bounds, ({ upper }) => upper),
    width: Float64Array.from(bounds, ({ width }) => width),
  };
}

export function reordered(system: TriangularSystem, order: readonly number[]): TriangularSystem {
  const { size, data } = system;
  const sorted = createSystem(size);
  for (let i = 0; i < size; i += 1) {
    const row = new Float64Array(size + 1);
    order.forEach((from, to) => (row[to] = data[i * (size + 1) + from]!));
    row[size] = data[i * (size + 1) + size]!;
    addRow(sorted, row);
  }
  return sorted;
}

/** The system of the unknowns from `begin` on, those before integrated out. */
export function lastUnknowns(system: TriangularSystem, begin: number): TriangularSystem {
  const size = system.size - begin;
  const last = createSystem(size);
  for (let i = 0; i < size; i += 1) {
    const from = (begin + i) * (system.size + 1) + begin;
    last.data.set(system.data.subarray(from, from + size + 1), i * (size + 1));
  }
  return last;
}
