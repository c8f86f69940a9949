import {
  addRow,
  createSystem,
  logDiagonal,
  setUnitPrior,
  type TriangularSystem,
} from "@weighhouse/numerics/triangular-system";
import { groupSums, type Group, type Sums } from "./sums";

/**
 * What the measurements of some measurands say of their levels and of the shared errors' draws,
 * whatever a hypothesis says of those: as a function of x = (levels minus centres, draws),
 *
 *   ln L(x) = logNorm - (squares + rss + |R x - z|^2) / 2 - N ln(2 pi) / 2
 *
 * with the draws per batch already integrated out. Every hypothesis with the same noises uses the
 * same one, so that its own work doesn't grow with the number of measurements.
 */
export interface Marginal {
  /** Unknowns: a level per part, in the order asked for, then `draws`. */
  system: TriangularSystem;
  draws: number[];
  logNorm: number;
  squares: number;
}

/** A measurand and the noise class that it is looked at in. */
export interface Part {
  measurand: number;
  noise: number;
}

/** A group, the level that it measures, and the noise class. */
interface Row {
  level: number;
  noise: number;
  group: Group;
}

/** The sums with what has been worked out of them; good until a reading is added. */
export interface Marginals {
  sums: Sums;
  /** Groups by batch, for the batches that more than one measurand draws from. */
  crossing: Map<string, Map<number, Group[]>>;
  locals: Map<string, Marginal>;
}

export function createMarginals(sums: Sums): Marginals {
  const crossing = new Map<string, Map<number, Group[]>>();
  sums.measurands.forEach(({ groups }, measurand) => {
    for (const group of groups) {
      if (group.batch === null) continue;
      const batch = crossing.get(group.batch) ?? new Map<number, Group[]>();
      batch.set(measurand, [...(batch.get(measurand) ?? []), group]);
      crossing.set(group.batch, batch);
    }
  });
  for (const [batch, measurands] of crossing) if (measurands.size < 2) crossing.delete(batch);
  return { sums, crossing, locals: new Map() };
}

/**
 * @param parts the measurands, each once
 * @param kept draws per batch that stay unknowns of the result; all others are integrated out
 */
export function marginalOf(
  marginals: Marginals,
  parts: readonly Part[],
  kept: ReadonlySet<number> = new Set(),
): Marginal {
  const locals = parts.map((part) => localOf(marginals, part));
  const batches = crossingRows(marginals, parts);
  const drawn = new Set(locals.flatMap(({ draws }) => draws));
  for (const { group } of batches.flat()) {
    for (const draw of group.draws) if (isOpen(marginals.sums, draw, kept)) drawn.add(draw);
  }
  const draws = [...drawn].sort((a, b) => a - b);
  const columns = new Map(draws.map((draw, i) => [draw, parts.length + i]));
  const system = createSystem(parts.length + draws.length);
  const marginal: Marginal = { system, draws, logNorm: 0, squares: 0 };
  locals.forEach((local, level) => addLocal(marginal, local, { level, columns }));
  for (const rows of batches) addBatch(marginal, rows, columns);
  return marginal;
}

function isOpen(sums: Sums, draw: number, kept: ReadonlySet<number>): boolean {
  return sums.draws[draw]!.batch === null || kept.has(draw);
}

function crossingRows({ crossing }: Marginals, parts: readonly Part[]): Row[][] {
  const batches: Row[][] = [];
  for (const measurands of crossing.values()) {
    const rows: Row[] = [];
    parts.forEach(({ measurand, noise }, level) => {
      for (const group of measurands.get(measurand) ?? []) rows.push({ level, noise, group });
    });
    if (rows.length > 0) batches.push(rows);
  }
  return batches;
}

/** The part's own groups, but for batches shared with other measurands. */
function localOf(marginals: Marginals, { measurand, noise }: Part): Marginal {
  const key = `${measurand}/${noise}`;
  const there = marginals.locals.get(key);
  if (there !== undefined) return there;
  const { sums, crossing } = marginals;
  const plain: Row[] = [];
  const batches = new Map<string, Row[]>();
  const drawn = new Set<number>();
  for (const group of sums.measurands[measurand]!.groups) {
    if (group.batch !== null && crossing.has(group.batch)) continue;
    const row = { level: 0, noise, group };
    if (group.batch === null) plain.push(row);
    else batches.set(group.batch, [...(batches.get(group.batch) ?? []), row]);
    for (const draw of group.draws) if (sums.draws[draw]!.batch === null) drawn.add(draw);
  }
  const draws = [...drawn].sort((a, b) => a - b);
  const columns = new Map(draws.map((draw, i) => [draw, i + 1]));
  const system = createSystem(1 + draws.length);
  const local: Marginal = { system, draws, logNorm: 0, squares: 0 };
  for (const row of plain) {
    countScatter(local, row);
    const place = (draw: number) => columns.get(draw)!;
    addRow(system, equation(row, { size: system.size, level: 0, place }));
  }
  for (const rows of batches.values()) addBatch(local, rows, columns);
  marginals.locals.set(key, local);
  return local;
}

/** What levels and draws can't change: the norm, and the scatter inside the group. */
function countScatter(marginal: Marginal, { group, noise }: Row): void {
  const { squares, logVariance } = groupSums(group, noise);
  marginal.squares += squares;
  marginal.logNorm -= logVariance / 2;
}

/** A group as an equation of unit variance: sqrt(w) (level + sum of u eta) = sqrt(w) mean. */
function equation(
  { group, noise }: Row,
  { size, level, place }: { size: number; level: number; place: (draw: number) => number },
): Float64Array {
  const { weight, mean } = groupSums(group, noise);
  const root = Math.sqrt(weight);
  const row = new Float64Array(size + 1);
  row[level] = root;
  for (let i = 0; i < group.draws.length; i += 1) {
    row[place(group.draws[i]!)] = root * group.loadings[i]!;
  }
  row[size] = root * mean;
  return row;
}

/**
 * One batch: its own draws come first, under their prior N(0, 1), and are rotated away; what is
 * left over bears on the levels and the open draws alone.
 */
function addBatch(marginal: Marginal, rows: Row[], columns: ReadonlyMap<number, number>): void {
  const own = new Map<number, number>();
  const outer = new Map<number, number>();
  for (const { group, level } of rows) {
    for (const draw of group.draws)
      if (!columns.has(draw) && !own.has(draw)) own.set(draw, own.size);
    for (const column of [level, ...group.draws.map((draw) => columns.get(draw))]) {
      if (column !== undefined && !outer.has(column)) outer.set(column, 0);
    }
  }
  const ordered = [...outer.keys()].sort((a, b) => a - b);
  ordered.forEach((column, i) => outer.set(column, own.size + i));
  const system = createSystem(own.size + ordered.length);
  for (let i = 0; i < own.size; i += 1) setUnitPrior(system, i);
  const place = (draw: number) => own.get(draw) ?? outer.get(columns.get(draw)!)!;
  for (const row of rows) {
    countScatter(marginal, row);
    addRow(system, equation(row, { size: system.size, level: outer.get(row.level)!, place }));
  }
  marginal.logNorm -= logDiagonal(system, 0, own.size);
  marginal.squares += system.rss;
  addRows(marginal.system, system, { first: own.size, columns: ordered });
}

function addLocal(
  marginal: Marginal,
  local: Marginal,
  { level, columns }: { level: number; columns: ReadonlyMap<number, number> },
): void {
  marginal.logNorm += local.logNorm;
  marginal.squares += local.squares + local.system.rss;
  const places = [level, ...local.draws.map((draw) => columns.get(draw)!)];
  addRows(marginal.system, local.system, { first: 0, columns: places });
}

/** Adds the rows of a smaller system from `first` on, whose unknowns are `columns` of the larger. */
function addRows(
  target: TriangularSystem,
  source: TriangularSystem,
  { first, columns }: { first: number; columns: number[] },
): void {
  const width = source.size + 1;
  for (let i = first; i < source.size; i += 1) {
    const start = i * width;
    if (source.data[start + i] === 0) continue;
    const row = new Float64Array(target.size + 1);
    for (let k = i; k < source.size; k += 1) row[columns[k - first]!] = source.data[start + k]!;
    row[target.size] = source.data[start + source.size]!;
    addRow(target, row, columns[i - first]);
  }
}
