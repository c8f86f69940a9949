import type { Box, LogIntegral } from "@weighhouse/numerics/box";
import { logBoxIntegral, logCoupledBoxIntegral } from "@weighhouse/numerics/box-integral";
import { LN_SQRT_2PI, normalCdf } from "@weighhouse/numerics/normal";
import {
  addRow,
  createSystem,
  logDiagonal,
  type TriangularSystem,
} from "@weighhouse/numerics/triangular-system";
import type { Layout } from "./layout";

/** Bounds may be let go where all of them together cut off less than this share of the integral. */
const NEGLIGIBLE_SHARE = 1e-13;
const LEAST_SHARE = 1e-280;
/** A diagonal of less than this over the width says nothing that could be told. */
const NOTHING_KNOWN = 1e-8;

/**
 * The tail's part of ln Z: a Gaussian over a box, divided by the box's volume,
 *
 *   ln int exp(-|R t - q|^2 / 2) dt - sum ln(upper - lower)
 *
 * One flat unknown is closed-form. Of more, those whose bounds cut off nothing that counts are
 * integrated over the whole line, in closed form; two or three that are left by nested quadrature;
 * more by quadrature over the normal unknowns that couple them where the tail has those, else on a
 * lattice.
 *
 * @param tail over the layout's couplers, each N(0, 1), and then its flat unknowns
 * Accuracy: up to three, and with couplers, 1e-9 in ln; more within three stated errors.
 */
export function lnBoxes(layout: Layout, tail: TriangularSystem): LogIntegral {
  const { bounds } = layout;
  const couplers = layout.open - layout.inner;
  const lnNormals = -logDiagonal(tail, 0, couplers);
  if (bounds.length === 0) return { ln: lnNormals, error: 0 };
  let lnVolume = 0;
  for (const { width } of bounds) lnVolume += Math.log(width);
  const coupled: Coupled = (order, free) => {
    const { ln, error } = overCouplers(tail, { bounds, couplers, open: order.slice(0, free) });
    return { ln: ln - lnNormals, error };
  };
  const system = lastUnknowns(tail, couplers);
  const integral = lnBox(system, bounds, couplers > 0 ? coupled : null);
  return { ln: lnNormals + integral.ln - lnVolume, error: integral.error };
}

/** Where more than three bounds count: by the couplers, where the tail has some. */
type Coupled = (order: readonly number[], free: number) => LogIntegral;

/** ln of the integral over a box, bounds infinite or not; diagonals of 0 allowed. */
export function lnBox(
  system: TriangularSystem,
  bounds: Bounds,
  coupled: Coupled | null = null,
): LogIntegral {
  if (system.size === 1) return logBoxIntegral(system, boxOf(bounds));
  return overBoxes(informed(system, bounds), bounds, coupled);
}

type Bounds = Layout["bounds"];

function boxOf(bounds: Bounds): Required<Box> {
  return {
    lower: Float64Array.from(bounds, ({ lower }) => lower),
    upper: Float64Array.from(bounds, ({ upper }) => upper),
    width: Float64Array.from(bounds, ({ width }) => width),
  };
}

/** With a little said of those of which nothing is: a normal of 1e8 widths, which changes nothing. */
function informed(tail: TriangularSystem, bounds: Bounds): TriangularSystem {
  const system = createSystem(tail.size);
  system.data.set(tail.data);
  const width = tail.size + 1;
  bounds.forEach((one, i) => {
    if (Math.abs(system.data[i * width + i]!) * one.width >= NOTHING_KNOWN) return;
    const little = NOTHING_KNOWN / one.width;
    const row = new Float64Array(width);
    row[i] = little;
    row[tail.size] = (little * (one.lower + one.upper)) / 2;
    addRow(system, row, i);
  });
  return system;
}

/** Lets go of bounds as far as the answer allows, checked against the answer itself. */
function overBoxes(system: TriangularSystem, bounds: Bounds, coupled: Coupled | null): LogIntegral {
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
    const many = order.length - free > 3;
    const integral =
      many && coupled !== null ? coupled(order, free) : bounded(system, { bounds, order, free });
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

/** @param open flat unknowns whose bounds are let go */
function overCouplers(
  tail: TriangularSystem,
  { bounds, couplers, open }: { bounds: Bounds; couplers: number; open: readonly number[] },
): LogIntegral {
  const flats = bounds.map((_, f) => couplers + f);
  const sorted = reordered(tail, [...flats, ...Array.from({ length: couplers }, (_, c) => c)]);
  const box = boxOf(bounds);
  for (const f of open) {
    box.lower[f] = -Infinity;
    box.upper[f] = Infinity;
    box.width[f] = Infinity;
  }
  const integral = logCoupledBoxIntegral(sorted, box);
  return { ln: integral.ln - couplers * LN_SQRT_2PI, error: integral.error };
}

function reordered(system: TriangularSystem, order: readonly number[]): TriangularSystem {
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
