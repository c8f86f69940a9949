import type { GlsGroup, GlsLoad, GlsRow } from "./least-squares";
import { asymmetricVariance } from "../block/asymmetric";
import type { Frame } from "../frame";
import type { Reading } from "../readings";
import { MEAN, placeOf, SQUARES, WEIGHT } from "../sums";
import type { Workspace } from "../workspace";

/** A measurand's Gaussian measurements as rows of one level. */
export interface LevelRows {
  rows: GlsRow[];
  /** Of each row, the reading it is; null for a group of the sums, which are one mean. */
  readings: (Reading | null)[];
  groups: GlsGroup[];
  /** Chi-square inside the groups of the sums. */
  squares: number;
}

/** A draw of a shared error by name. */
export function drawName(error: number, batch: string | null): string {
  return batch === null ? `${error}` : `${error} ${batch}`;
}

/** The draw of a name. */
export function drawNamed(name: string): { error: number; batch: string | null } {
  const at = name.indexOf(" ");
  return at < 0
    ? { error: Number(name), batch: null }
    : { error: Number(name.slice(0, at)), batch: name.slice(at + 1) };
}

/**
 * Rows of the values (and of limits compatible with zero) with what their shared errors do to them
 * where the level is at `level`; the variance of an asymmetric one is that at the level.
 */
export function levelRows(workspace: Workspace, measurand: number, level: number): LevelRows {
  const { frame, sums } = workspace;
  const own = sums.measurands[measurand]!;
  const { scatterVariance } = frame.measurands[measurand]!;
  const rows: GlsRow[] = [];
  const readings: (Reading | null)[] = [];
  let squares = 0;
  own.patterns.forEach((place, group) => {
    const { draws, loadings, relative } = sums.patterns[place]!;
    const at = placeOf(own, group, 0);
    rows.push({
      y: own.centre + own.sums[at + MEAN]!,
      variance: 1 / own.sums[at + WEIGHT]!,
      loads: draws.map((draw, k) => {
        const { error, batch } = sums.draws[draw]!;
        const value = loadings[k]! * (relative[k] ? level : 1);
        return { draw: drawName(error, batch), batch, value };
      }),
    });
    readings.push(null);
    squares += own.sums[at + SQUARES]!;
  });
  for (const reading of own.kept) {
    const variance = ownVariance(reading, level);
    if (variance === null || !("y" in reading.told)) continue;
    const loads = loadsAt(reading, level);
    rows.push({ y: reading.told.y, variance: variance + scatterVariance, loads });
    readings.push(reading);
  }
  const groups = groupsOf(frame, { readings, rows, level });
  return { rows, readings, groups, squares };
}

/** What one standard deviation of each draw does to a reading whose level is at `level`. */
export function loadsAt({ loadings }: Reading, level: number): GlsLoad[] {
  return loadings.map(({ error, batch, value, relative }) => ({
    draw: drawName(error, batch),
    batch,
    value: relative ? value * level : value,
  }));
}

/** Without scatter; null for what isn't Gaussian. */
function ownVariance({ told }: Reading, level: number): number | null {
  if (told.form === "value" || told.form === "zero") return told.variance;
  if (told.form !== "asymmetric") return null;
  return asymmetricVariance(level - told.y, told.plus, told.minus);
}

/** Correlated readings of one measurand, with the covariance of their noises. */
function groupsOf(
  frame: Frame,
  {
    readings,
    rows,
    level,
  }: { readings: readonly (Reading | null)[]; rows: readonly GlsRow[]; level: number },
): GlsGroup[] {
  const places = new Map<string, number>();
  readings.forEach((reading, i) => {
    if (reading !== null && frame.correlated.has(reading.id)) places.set(reading.id, i);
  });
  if (places.size < 2) return [];
  const groups = new Map<number, Set<number>>();
  const pairs: { a: number; b: number; coefficient: number }[] = [];
  for (const { a, b, coefficient } of frame.document.correlations) {
    const [i, j] = [places.get(a), places.get(b)];
    if (i === undefined || j === undefined || coefficient === 0) continue;
    pairs.push({ a: i, b: j, coefficient });
    const both = new Set([...(groups.get(i) ?? [i]), ...(groups.get(j) ?? [j])]);
    for (const one of both) groups.set(one, both);
  }
  return [...new Set(groups.values())].map((members) => {
    const order = [...members].sort((a, b) => a - b);
    const at = new Map(order.map((row, k) => [row, k]));
    const n = order.length;
    const covariance = new Float64Array(n * n);
    order.forEach((row, k) => (covariance[k * n + k] = rows[row]!.variance));
    for (const { a, b, coefficient } of pairs) {
      const [i, j] = [at.get(a), at.get(b)];
      if (i === undefined || j === undefined) continue;
      const sds = [a, b].map((row) => Math.sqrt(ownVariance(readings[row]!, level)!));
      covariance[i * n + j] = covariance[j * n + i] = coefficient * sds[0]! * sds[1]!;
    }
    return { rows: order, covariance };
  });
}
