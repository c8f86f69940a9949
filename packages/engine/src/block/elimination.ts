import { createSystem, type TriangularSystem } from "@weighhouse/numerics/triangular-system";
import type { Layout } from "./layout";
import type { PivotRow, PriorRows } from "./prior-rows";
import { flushRows, nextRow, rowBlock, type RowBlock } from "./row-block";
import type { WhiteRows } from "./whitening";

/**
 * Gaussian rows and priors in square-root form: the unknowns at [0, inner) eliminated, one sparse
 * row each, and what is left of the others, |R t - q|^2 + rss.
 */
export interface Eliminated {
  /** Row p: its first position is p. */
  pivots: readonly PivotRow[];
  /** ln |R_pp| added up over the pivots. */
  logPivots: number;
  /** Over positions [inner, size). */
  tail: TriangularSystem;
}

/**
 * Multifrontal QR: the rows that begin with one unknown are reflected together in a small system over
 * the unknowns they have, its first row is that unknown's pivot, the others go on to the unknown
 * they begin with. A row costs O(k^2) for the k unknowns that it meets, not for all.
 *
 * Reflections of the rows themselves, so that the ratio of uncertainties isn't squared.
 * Source: Golub & Van Loan, Matrix Computations, 5.1; Davis, Direct Methods for Sparse Linear
 * Systems (2006), 5.
 */
export function eliminate(layout: Layout, white: WhiteRows, prior: PriorRows): Eliminated {
  const { inner, size } = layout;
  const byFirst = rowsByFirst(white, inner);
  const expected = size === inner ? 1 : byFirst.rest.length + 2 * size;
  const tail = rowBlock(createSystem(size - inner), expected);
  const waiting: PivotRow[][] = Array.from({ length: inner }, () => []);
  for (const row of prior.rows) passOn(row, { inner, tail, waiting });
  passTail(white, byFirst.rest, { inner, tail });
  const pivots: PivotRow[] = [];
  let logPivots = 0;
  const place = new Int32Array(size).fill(-1);
  for (let p = 0; p < inner; p += 1) {
    const front = frontOf({ white, rows: byFirst.of(p), waiting: waiting[p]!, place });
    waiting[p] = [];
    const [pivot, ...others] = front;
    pivots.push(pivot!);
    logPivots += Math.log(Math.abs(pivot!.value[0]!));
    for (const row of others) passOn(row, { inner, tail, waiting });
    tail.system.rss += front.rss;
  }
  flushRows(tail);
  return { pivots, logPivots, tail: tail.system };
}

interface Target {
  inner: number;
  tail: RowBlock;
  waiting: PivotRow[][];
}

function passOn(row: PivotRow, { inner, tail, waiting }: Target): void {
  const first = row.position[0]!;
  if (first < inner) {
    waiting[first]!.push(row);
    return;
  }
  const at = nextRow(tail);
  const { data, system, apart } = tail;
  for (let e = 0; e < row.position.length; e += 1) {
    data[at + apart * (row.position[e]! - inner)]! += row.value[e]!;
  }
  data[at + apart * system.size] = row.value[row.position.length]!;
}

/** White rows by the position that they begin with; those beyond `inner`, or of none, in `rest`. */
function rowsByFirst({ count, start, position }: WhiteRows, inner: number) {
  const counts = new Int32Array(inner + 2);
  const first = new Int32Array(count);
  for (let n = 0; n < count; n += 1) {
    first[n] = start[n] === start[n + 1] ? inner : Math.min(position[start[n]!]!, inner);
    counts[first[n]! + 1]! += 1;
  }
  for (let p = 0; p <= inner; p += 1) counts[p + 1]! += counts[p]!;
  const sorted = new Int32Array(count);
  const next = counts.slice();
  for (let n = 0; n < count; n += 1) {
    sorted[next[first[n]!]!] = n;
    next[first[n]!]! += 1;
  }
  const of = (p: number) => sorted.subarray(counts[p]!, counts[p + 1]!);
  return { of, rest: of(inner) };
}

function passTail(
  { start, position, value, right }: WhiteRows,
  rows: Int32Array,
  { inner, tail }: { inner: number; tail: RowBlock },
): void {
  const { data, system, apart } = tail;
  for (let n = 0; n < rows.length; n += 1) {
    const row = rows[n]!;
    const begin = start[row]!;
    const end = start[row + 1]!;
    if (begin === end) {
      system.rss += right[row]! * right[row]!;
      continue;
    }
    const at = nextRow(tail);
    for (let e = begin; e < end; e += 1) {
      data[at + apart * (position[e]! - inner)]! += value[e]!;
    }
    data[at + apart * system.size] = right[row]!;
  }
}

type Front = PivotRow[] & { rss: number };

function frontOf({
  white,
  rows,
  waiting,
  place,
}: {
  white: WhiteRows;
  rows: Int32Array;
  waiting: readonly PivotRow[];
  place: Int32Array;
}): Front {
  const { start, position, value, right } = white;
  const positions = unionOf({ white, rows, waiting, place });
  positions.forEach((p, c) => (place[p] = c));
  const size = positions.length;
  const block = rowBlock(createSystem(size), rows.length + waiting.length);
  const { data, apart } = block;
  for (const row of waiting) {
    const at = nextRow(block);
    for (let e = 0; e < row.position.length; e += 1) {
      data[at + apart * place[row.position[e]!]!]! += row.value[e]!;
    }
    data[at + apart * size] = row.value[row.position.length]!;
  }
  for (let n = 0; n < rows.length; n += 1) {
    const row = rows[n]!;
    const at = nextRow(block);
    for (let e = start[row]!; e < start[row + 1]!; e += 1) {
      data[at + apart * place[position[e]!]!]! += value[e]!;
    }
    data[at + apart * size] = right[row]!;
  }
  flushRows(block);
  for (const p of positions) place[p] = -1;
  return rowsOf(block.system, positions);
}

function rowsOf({ size, data, rss }: TriangularSystem, positions: Int32Array): Front {
  const front: Front = Object.assign([], { rss });
  for (let i = 0; i < size; i += 1) {
    const begin = i * (size + 1) + i;
    // A row without a diagonal is 0 throughout.
    if (data[begin] === 0) continue;
    front.push({
      position: positions.subarray(i),
      value: data.slice(begin, (i + 1) * (size + 1)),
    });
  }
  return front;
}

function unionOf({
  white: { start, position },
  rows,
  waiting,
  place,
}: {
  white: WhiteRows;
  rows: Int32Array;
  waiting: readonly PivotRow[];
  place: Int32Array;
}): Int32Array {
  const found: number[] = [];
  const note = (p: number) => {
    if (place[p] !== -1) return;
    place[p] = 0;
    found.push(p);
  };
  for (const row of waiting) for (const p of row.position) note(p);
  for (let n = 0; n < rows.length; n += 1) {
    const row = rows[n]!;
    for (let e = start[row]!; e < start[row + 1]!; e += 1) {
      if (place[position[e]!] === -1) note(position[e]!);
    }
  }
  for (const p of found) place[p] = -1;
  return Int32Array.from(found).sort();
}

/** Fills [0, inner) of the values by back-substitution, those of the tail given. */
export function backSubstitute({ pivots }: Eliminated, values: Float64Array): void {
  for (let p = pivots.length - 1; p >= 0; p -= 1) {
    const { position, value } = pivots[p]!;
    let rest = value[position.length]!;
    for (let e = 1; e < position.length; e += 1) rest -= value[e]! * values[position[e]!]!;
    values[p] = rest / value[0]!;
  }
}

/**
 * |R^-T a|^2 over [0, inner): the variance of a'z given the tail. What is left of a for the tail,
 * a_T - R_GT' R_GG^-T a_G, replaces its own entries there.
 *
 * @param a one per position; used up
 */
export function varianceGivenTail({ pivots }: Eliminated, a: Float64Array): number {
  let sum = 0;
  for (let p = 0; p < pivots.length; p += 1) {
    if (a[p] === 0) continue;
    const { position, value } = pivots[p]!;
    const v = a[p]! / value[0]!;
    for (let e = 1; e < position.length; e += 1) a[position[e]!]! -= value[e]! * v;
    sum += v * v;
  }
  return sum;
}

/** g <- (R'R)^-1 g, over all positions. */
export function solveNormal({ pivots, tail }: Eliminated, g: Float64Array): void {
  const inner = pivots.length;
  for (let p = 0; p < inner; p += 1) {
    const { position, value } = pivots[p]!;
    const v = g[p]! / value[0]!;
    g[p] = v;
    for (let e = 1; e < position.length; e += 1) g[position[e]!]! -= value[e]! * v;
  }
  const width = tail.size + 1;
  for (let i = 0; i < tail.size; i += 1) {
    g[inner + i] = g[inner + i]! / tail.data[i * width + i]!;
    for (let k = i + 1; k < tail.size; k += 1) {
      g[inner + k]! -= tail.data[i * width + k]! * g[inner + i]!;
    }
  }
  for (let i = tail.size - 1; i >= 0; i -= 1) {
    for (let k = i + 1; k < tail.size; k += 1) {
      g[inner + i]! -= tail.data[i * width + k]! * g[inner + k]!;
    }
    g[inner + i] = g[inner + i]! / tail.data[i * width + i]!;
  }
  for (let p = inner - 1; p >= 0; p -= 1) {
    const { position, value } = pivots[p]!;
    for (let e = 1; e < position.length; e += 1) g[p]! -= value[e]! * g[position[e]!]!;
    g[p] = g[p]! / value[0]!;
  }
}
