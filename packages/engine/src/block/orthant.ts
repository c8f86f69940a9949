import type { LogIntegral } from "@weighhouse/numerics/box";
import { LN_SQRT_2PI } from "@weighhouse/numerics/normal";
import { addRow, createSystem, logDiagonal } from "@weighhouse/numerics/triangular-system";
import { lnBox } from "./boxes";
import { lastUnknowns } from "./over-box";
import type { Integrand } from "./integrand";
import { othersLoadings } from "./open-part";
import type { Workbench } from "./workbench";

/** Fewer are for a quadrature, more for sampling. */
const FEWEST_DIMENSIONS = 4;
const MOST_BOXES = 60;

/**
 * ln Z where every row that isn't Gaussian is the probability of an interval (a censored reading, a
 * flat tolerance) and more than three directions couple them: what each such row would have read
 * becomes an unknown of its own, Gaussian, over its interval. So all is a Gaussian over a box.
 *
 * @returns null where it is something else
 * Accuracy: within three stated errors.
 */
export function lnOrthant(bench: Workbench, integrand: Integrand): LogIntegral | null {
  const { layout } = bench;
  const dimensions = integrand.rank + integrand.flats;
  const count = layout.others.length;
  const boxes = layout.factors.flatMap(({ box }) => (box === null ? [] : [box]));
  if (integrand.outer > 0 || dimensions < FEWEST_DIMENSIONS || boxes.length < count) return null;
  if (count + integrand.flats > MOST_BOXES) return null;
  const found = integrand.openAt(new Float64Array(0));
  if (found === null) return null;
  const { conditional } = found;
  const { tail } = conditional.eliminated;
  const normals = layout.open - layout.inner;
  // Normal unknowns, then the readings, then the flat unknowns.
  const system = createSystem(tail.size + count);
  const placeOf = (p: number) => (p < normals ? p : p + count);
  for (let i = 0; i < tail.size; i += 1) {
    const row = new Float64Array(system.size + 1);
    const start = i * (tail.size + 1);
    for (let k = i; k < tail.size; k += 1) row[placeOf(k)] = tail.data[start + k]!;
    row[system.size] = tail.data[start + tail.size]!;
    addRow(system, row, placeOf(i));
  }
  let ln = conditional.ln;
  const loadings = new Float64Array(tail.size);
  boxes.forEach((box, o) => {
    othersLoadings(bench, o, loadings);
    const row = new Float64Array(system.size + 1);
    loadings.forEach((value, k) => (row[placeOf(k)] = -value / box.sd));
    row[normals + o] = 1 / box.sd;
    row[system.size] = conditional.base[layout.others[o]!]! / box.sd;
    addRow(system, row);
    ln += box.lnScale - Math.log(box.sd) - LN_SQRT_2PI;
  });
  for (const { width } of layout.bounds) ln -= Math.log(width);
  const bounds = [
    ...boxes.map(({ lower, upper }) => ({ lower, upper, width: upper - lower })),
    ...layout.bounds,
  ];
  const integral = lnBox(lastUnknowns(system, normals), bounds);
  ln += integral.ln - logDiagonal(system, 0, normals) - system.rss / 2;
  return { ln, error: integral.error };
}
