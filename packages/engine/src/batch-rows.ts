import {
  addRow,
  createSystem,
  logDiagonal,
  setUnitPrior,
} from "@weighhouse/numerics/triangular-system";
import type { Marginal } from "./marginal-form";
import {
  LOG_VARIANCE,
  MEAN,
  placeOf,
  SQUARES,
  WEIGHT,
  type MeasurandSums,
  type Pattern,
} from "./sums";

/** A group as an equation: the level that it measures, its pattern, and where its numbers stand. */
export interface Row {
  level: number;
  noise: number;
  pattern: Pattern;
  sums: MeasurandSums;
  group: number;
}

/** Adds a group that draws from no batch. `columns` are the places of the open draws. */
export function addGroup(marginal: Marginal, row: Row, columns: ReadonlyMap<number, number>): void {
  countScatter(marginal, row);
  const place = (draw: number) => columns.get(draw)!;
  addRow(marginal.system, equation(row, { size: marginal.system.size, level: row.level, place }));
}

/** What levels and draws can't change: the norm, and the scatter inside the group. */
export function countScatter(marginal: Marginal, { sums, group, noise }: Row): void {
  const at = placeOf(sums, group, noise);
  marginal.squares += sums.sums[at + SQUARES]!;
  marginal.logNorm -= sums.sums[at + LOG_VARIANCE]! / 2;
}

/** Unit variance: sqrt(w) (level + sum of u eta) = sqrt(w) mean. */
function equation(
  { sums, group, noise, pattern }: Row,
  { size, level, place }: { size: number; level: number; place: (draw: number) => number },
): Float64Array {
  const at = placeOf(sums, group, noise);
  const root = Math.sqrt(sums.sums[at + WEIGHT]!);
  const row = new Float64Array(size + 1);
  row[level] = root;
  for (let i = 0; i < pattern.draws.length; i += 1) {
    row[place(pattern.draws[i]!)] = root * pattern.loadings[i]!;
  }
  row[size] = root * sums.sums[at + MEAN]!;
  return row;
}

/**
 * Adds one batch by rotations: its own draws come first, under their prior N(0, 1), and are rotated
 * away; what is left over bears on the levels and the open draws alone.
 */
export function addBatch(
  marginal: Marginal,
  rows: readonly Row[],
  columns: ReadonlyMap<number, number>,
): void {
  const own = new Map<number, number>();
  const touched = new Set<number>();
  for (const { pattern, level } of rows) {
    touched.add(level);
    for (const draw of pattern.draws) {
      const column = columns.get(draw);
      if (column !== undefined) touched.add(column);
      else if (!own.has(draw)) own.set(draw, own.size);
    }
  }
  const outer = [...touched].sort((a, b) => a - b);
  const places = new Map(outer.map((column, i) => [column, own.size + i]));
  const system = createSystem(own.size + outer.length);
  for (let i = 0; i < own.size; i += 1) setUnitPrior(system, i);
  const place = (draw: number) => own.get(draw) ?? places.get(columns.get(draw)!)!;
  for (const row of rows) {
    countScatter(marginal, row);
    addRow(system, equation(row, { size: system.size, level: places.get(row.level)!, place }));
  }
  marginal.logNorm -= logDiagonal(system, 0, own.size);
  marginal.squares += system.rss;
  const { size, data } = system;
  const target = marginal.system;
  for (let i = own.size; i < size; i += 1) {
    const start = i * (size + 1);
    if (data[start + i] === 0) continue;
    const row = new Float64Array(target.size + 1);
    for (let k = i; k < size; k += 1) row[outer[k - own.size]!] = data[start + k]!;
    row[target.size] = data[start + size]!;
    addRow(target, row, outer[i - own.size]);
  }
}
