import {
  choleskyFactor,
  whiten,
  type CholeskyFactor,
} from "@weighhouse/numerics/symmetric-cholesky";
import {
  addRow,
  createSystem,
  setUnitPrior,
  type TriangularSystem,
} from "@weighhouse/numerics/triangular-system";

/** One value, in scoring space. */
export interface GlsRow {
  y: number;
  /** Its own, with scatter. */
  variance: number;
  /** Shared errors' draws, by any name, with what one standard deviation of each does to y. */
  loads: readonly GlsLoad[];
}

export interface GlsLoad {
  draw: string;
  value: number;
  /** A draw that only rows of this batch load; null: any may. */
  batch: string | null;
}

/** Rows whose own errors are correlated; each row in one group at most. */
export interface GlsGroup {
  rows: readonly number[];
  /** Covariance, row by row. */
  covariance: Float64Array;
}

export interface GlsFit {
  value: number;
  sd: number;
  chiSquare: number;
  /** What one standard deviation of each draw does to the value. */
  loadings: Map<string, number>;
  /** What is left of the variance without the draws. */
  ownVariance: number;
}

/**
 * One level of all rows by generalised least squares, y = mu + U eta + eps:
 *
 *   mu = 1' M y / 1' M 1,  var mu = 1 / 1' M 1,  chi2 = (y - mu)' M (y - mu),  M = (D + U U')^-1
 *
 * without an N x N matrix: rows are rotated into a triangle of (draws, mu), a batch's own draws
 * first and apart. The estimate's loading on a draw is minus the covariance of the two.
 *
 * @param rows at least one, variances > 0
 * @returns null where a group's covariance isn't positive definite
 * Accuracy: 1e-12 of sd. Cost: O(N k^2), k draws of one batch and those of none.
 */
export function generalisedLeastSquares(
  rows: readonly GlsRow[],
  groups: readonly GlsGroup[] = [],
): GlsFit | null {
  const whole = new Map<string, number>();
  for (const { loads } of rows) {
    for (const { draw, batch } of loads) {
      if (batch === null && !whole.has(draw)) whole.set(draw, whole.size);
    }
  }
  const centre = rows[0]!.y;
  const system = createSystem(whole.size + 1);
  for (let k = 0; k < whole.size; k += 1) setUnitPrior(system, k);
  const parts = partsOf(rows, groups);
  const locals: Local[] = [];
  for (const part of parts) {
    const local = localSystem(part, { rows, groups, whole, centre });
    if (local === null) return null;
    passOn(local, system);
    if (local.draws.length > 0) locals.push(local);
  }
  return readOff({ system, whole, locals, centre });
}

/** Rows that batches and correlations tie together. */
interface Part {
  rows: number[];
  groups: GlsGroup[];
}

function partsOf(rows: readonly GlsRow[], groups: readonly GlsGroup[]): Part[] {
  const root = Int32Array.from(rows, (_, i) => i);
  const find = (i: number): number => {
    let at = i;
    while (root[at] !== at) at = root[at] = root[root[at]!]!;
    return at;
  };
  const join = (a: number, b: number) => {
    root[find(b)] = find(a);
  };
  const byDraw = new Map<string, number>();
  // Rows that nothing local touches are one part: their order is that of the rows.
  let free = -1;
  const grouped = new Set(groups.flatMap((group) => [...group.rows]));
  rows.forEach(({ loads }, i) => {
    const own = loads.filter(({ batch }) => batch !== null);
    if (own.length === 0 && !grouped.has(i)) {
      if (free >= 0) join(free, i);
      else free = i;
    }
    for (const { draw } of own) {
      const first = byDraw.get(draw);
      if (first === undefined) byDraw.set(draw, i);
      else join(first, i);
    }
  });
  for (const {
    rows: [first, ...rest],
  } of groups)
    for (const other of rest) join(first!, other);
  const parts = new Map<number, Part>();
  rows.forEach((_, i) => {
    const part = parts.get(find(i));
    if (part === undefined) parts.set(find(i), { rows: [i], groups: [] });
    else part.rows.push(i);
  });
  for (const group of groups) parts.get(find(group.rows[0]!))!.groups.push(group);
  return [...parts.values()];
}

interface Local {
  system: TriangularSystem;
  /** First the part's own draws, then the whole's, then mu. */
  draws: string[];
}

function localSystem(
  { rows: places, groups }: Part,
  {
    rows,
    whole,
    centre,
  }: {
    rows: readonly GlsRow[];
    groups: readonly GlsGroup[];
    whole: ReadonlyMap<string, number>;
    centre: number;
  },
): Local | null {
  const own = new Map<string, number>();
  for (const place of places) {
    for (const { draw, batch } of rows[place]!.loads) {
      if (batch !== null && !own.has(draw)) own.set(draw, own.size);
    }
  }
  const size = own.size + whole.size + 1;
  const system = createSystem(size);
  for (let k = 0; k < own.size; k += 1) setUnitPrior(system, k);
  const equation = (place: number) => {
    const row = new Float64Array(size + 1);
    for (const { draw, batch, value } of rows[place]!.loads) {
      const column = batch === null ? own.size + whole.get(draw)! : own.get(draw)!;
      row[column]! += value;
    }
    row[size - 1] = 1;
    row[size] = rows[place]!.y - centre;
    return row;
  };
  const grouped = new Set(groups.flatMap((group) => [...group.rows]));
  for (const place of places) {
    if (grouped.has(place)) continue;
    const row = equation(place);
    const sd = Math.sqrt(rows[place]!.variance);
    for (let k = 0; k <= size; k += 1) row[k]! /= sd;
    addRow(system, row);
  }
  for (const group of groups) {
    const factor = choleskyFactor(group.covariance, group.rows.length);
    if (!factor.ok) return null;
    for (const row of whitened(factor.factor, group.rows.map(equation))) addRow(system, row);
  }
  return { system, draws: [...own.keys()] };
}

/** Equations in which the rows' errors are independent and of unit variance. */
function whitened(factor: CholeskyFactor, equations: readonly Float64Array[]): Float64Array[] {
  const width = equations[0]!.length;
  const column = new Float64Array(equations.length);
  for (let k = 0; k < width; k += 1) {
    for (let i = 0; i < column.length; i += 1) column[i] = equations[i]![k]!;
    whiten(factor, column);
    for (let i = 0; i < column.length; i += 1) equations[i]![k] = column[i]!;
  }
  return [...equations];
}

/** What a part says of the whole's draws and of mu. */
function passOn({ system: local, draws }: Local, system: TriangularSystem): void {
  const begin = draws.length;
  system.rss += local.rss;
  for (let i = begin; i < local.size; i += 1) {
    const start = i * (local.size + 1);
    if (local.data[start + i] === 0) continue;
    addRow(system, local.data.slice(start + begin, start + local.size + 1), i - begin);
  }
}

/** The last unknown's value and sd, and its covariance with every draw by back substitution. */
function readOff({
  system,
  whole,
  locals,
  centre,
}: {
  system: TriangularSystem;
  whole: ReadonlyMap<string, number>;
  locals: readonly Local[];
  centre: number;
}): GlsFit {
  const { size, data } = system;
  const width = size + 1;
  const last = data[(size - 1) * width + size - 1]!;
  const known = new Float64Array(size);
  known[size - 1] = 1 / (last * last);
  const loadings = new Map<string, number>();
  solveUpwards(system, known, size - 1);
  for (const [draw, k] of whole) loadings.set(draw, -known[k]!);
  for (const { system: local, draws } of locals) {
    const all = new Float64Array(local.size);
    all.set(known, draws.length);
    solveUpwards(local, all, draws.length);
    draws.forEach((draw, k) => loadings.set(draw, -all[k]!));
  }
  let ownVariance = 1 / (last * last);
  for (const loading of loadings.values()) ownVariance -= loading * loading;
  return {
    value: centre + data[(size - 1) * width + size]! / last,
    sd: 1 / Math.abs(last),
    chiSquare: system.rss,
    loadings,
    ownVariance: Math.max(ownVariance, 0),
  };
}

/** Entries before `from` so that R x = 0 in their rows. */
function solveUpwards({ size, data }: TriangularSystem, x: Float64Array, from: number): void {
  for (let i = from - 1; i >= 0; i -= 1) {
    const start = i * (size + 1);
    let sum = 0;
    for (let k = i + 1; k < size; k += 1) sum -= data[start + k]! * x[k]!;
    x[i] = sum / data[start + i]!;
  }
}
