import type { ToleranceFrame } from "../frame";
import type { Expected, Section } from "./section";
import { levelKey } from "./shared-unknowns";

type Smooth = Extract<ToleranceFrame, { sharing: "smooth" }>;

/** Adds covariance sd^2 exp(-|x_i - x_j| / length) along a condition. */
export function smoothTolerance(section: Section, tolerance: Smooth, expected: Expected): void {
  const { open, rows, begin } = section;
  const { sd, length, condition, relative } = tolerance;
  const x = Float64Array.from(rows, ({ conditions }) => conditions[condition]!);
  if (relative) {
    addRelative(section, { x, sd, length, expected });
    return;
  }
  const places = Int32Array.from(rows, (_, i) => begin + i);
  open.smooth = [...open.smooth, { sd, length, rows: places, x }];
}

/**
 * The process of unit variance as a chain over the places in order,
 *
 *   s_0 = z_0,   s_k = rho_k s_(k-1) + sqrt(1 - rho_k^2) z_k,   rho_k = exp(-(x_k - x_(k-1)) / length)
 *
 * so that row i's tolerance, sd |expected_i| s_k, is linear in the z of its place and of all before.
 */
function addRelative(
  section: Section,
  { x, sd, length, expected }: { x: Float64Array; sd: number; length: number; expected: Expected },
): void {
  const { assembly, part, begin } = section;
  const places = [...new Set(x)].sort((a, b) => a - b);
  const unknowns = places.map((_, k) =>
    assembly.addLinear(`${levelKey(part.measurand)} at ${k}`, { kind: "normal" }),
  );
  const chain = chainOf(places, length);
  const rowsAt = [...x].map((at) => places.indexOf(at));
  const shareOf = (i: number, z: number) =>
    sd * Math.abs(expected.values[i]!) * chain[rowsAt[i]!]![z]!;
  unknowns.forEach((unknown, z) => {
    const after = rowsAt.flatMap((k, i) => (k >= z ? [i] : []));
    if (expected.moving) {
      assembly.loadMoving(unknown, (column) => {
        for (const i of after) column[begin + i] = shareOf(i, z);
      });
    } else for (const i of after) assembly.load(unknown, begin + i, shareOf(i, z));
  });
}

/** Per place, what each z up to its own brings. */
function chainOf(places: readonly number[], length: number): number[][] {
  const chain: number[][] = [];
  places.forEach((at, k) => {
    if (k === 0) {
      chain.push([1]);
      return;
    }
    const step = (at - places[k - 1]!) / length;
    const rho = Math.exp(-step);
    chain.push([...chain[k - 1]!.map((one) => rho * one), Math.sqrt(-Math.expm1(-2 * step))]);
  });
  return chain;
}
