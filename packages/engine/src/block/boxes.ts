import type { LogIntegral } from "@weighhouse/numerics/box";
import { logCoupledBoxIntegral } from "@weighhouse/numerics/box-integral";
import { LN_SQRT_2PI } from "@weighhouse/numerics/normal";
import {
  addRow,
  createSystem,
  logDiagonal,
  type TriangularSystem,
} from "@weighhouse/numerics/triangular-system";
import type { Layout } from "./layout";
import { boxOf, lastUnknowns, lnOverBox, reordered, type Bounds, type Coupled } from "./over-box";

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
  // Where more than three bounds count.
  const coupled: Coupled = (order, free) => {
    if (order.length - free <= 3) return null;
    const { ln, error } = overCouplers(tail, { bounds, couplers, open: order.slice(0, free) });
    return { ln: ln - lnNormals, error };
  };
  const system = lastUnknowns(tail, couplers);
  const integral = lnBox(system, bounds, couplers > 0 ? coupled : undefined);
  return { ln: lnNormals + integral.ln - lnVolume, error: integral.error };
}

/** ln of the integral over a box, bounds infinite or not; diagonals of 0 allowed. */
export function lnBox(system: TriangularSystem, bounds: Bounds, coupled?: Coupled): LogIntegral {
  return lnOverBox(system.size === 1 ? system : informed(system, bounds), bounds, coupled);
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
