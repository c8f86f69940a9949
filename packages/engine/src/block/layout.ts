import { allowsExactAsymmetry, asymmetricFactor } from "./asymmetric";
import { eachFlatFactor } from "./factors";
import {
  ASYMMETRIC,
  EACH_FLAT,
  FACTOR,
  type BlockProblem,
  type BlockRows,
  type Factor,
} from "./problem";

/**
 * A block's unknowns in the order in which they are eliminated, and each row's pattern in it.
 * Positions: [0, inner) normal unknowns that only Gaussian rows see, gone in closed form;
 * [inner, open) normal ones that other rows see, and the values of smooth processes at those rows;
 * [open, size) flat ones.
 */
export interface Layout {
  problem: BlockProblem;
  /** Rows taken as Gaussian, and the others with their likelihoods of mu. */
  gaussian: Int32Array;
  others: Int32Array;
  factors: readonly Factor[];
  /** Whether asymmetric rows are among the Gaussian ones, their variance hanging on the fit. */
  moving: boolean;
  /** Rows among the Gaussian ones that stand for a residual that isn't linear in mu. */
  bent: readonly BentRow[];
  inner: number;
  open: number;
  size: number;
  /** Position of each linear unknown. */
  place: Int32Array;
  bounds: readonly { lower: number; upper: number; width: number }[];
  /** Per row, its positions in increasing order; `source` >= 0 is an entry of the design. */
  start: Int32Array;
  position: Int32Array;
  /** -1 - d: column d of the moving ones, `varying` first, then `atFit`. */
  source: Int32Array;
  /** Values of smooth processes at rows that aren't Gaussian. */
  latents: readonly Latent[];
  /** Per one of `others`, the position of its process's value, or -1. */
  latentOf: Int32Array;
}

export interface BentRow {
  row: number;
  factor: Factor;
  residual(mu: number): number;
}

interface Latent {
  position: number;
  process: number;
  x: number;
}

/**
 * @param purpose for a fit, rows without a residual are left out and no row is kept open
 * @param couplers normal unknowns that aren't eliminated, only Gaussian rows seeing any
 */
export function layoutOf(
  problem: BlockProblem,
  purpose: "evidence" | "fit",
  couplers: ReadonlySet<number> = new Set(),
): Layout {
  const { rows, linear } = problem;
  const exact = purpose === "evidence" && allowsExactAsymmetry(problem);
  const split = purpose === "fit" ? fittedRows(problem) : splitRows(problem, exact);
  const latents = latentsOf(problem, split.others);
  const entries = entriesOf(problem);
  const seen = seenBy(entries, split.others);
  const inner: number[] = [];
  const open: number[] = [];
  const flats: number[] = [];
  linear.forEach(({ kind }, k) => {
    if (kind === "flat") flats.push(k);
    else if (seen.has(k) || couplers.has(k)) open.push(k);
    else inner.push(k);
  });
  const touches = new Float64Array(linear.length);
  for (const k of entries.unknown) touches[k]! += 1;
  // Those of few rows first, so that a batch's own draw is gone before anything fills in.
  inner.sort((a, b) => touches[a]! - touches[b]! || a - b);
  const place = new Int32Array(linear.length);
  [...inner, ...open].forEach((k, i) => (place[k] = i));
  const opened = inner.length + open.length + latents.places.length;
  flats.forEach((k, i) => (place[k] = opened + i));
  return {
    problem,
    ...split,
    moving: purpose === "evidence" && !exact && rows.kind.includes(ASYMMETRIC),
    inner: inner.length,
    open: opened,
    size: opened + flats.length,
    place,
    bounds: flats.map((k) => {
      const one = linear[k]!;
      return one.kind === "flat" ? one : { lower: -Infinity, upper: Infinity, width: Infinity };
    }),
    ...patternOf(entries, place),
    latents: latents.places.map((one, i) => ({ ...one, position: inner.length + open.length + i })),
    latentOf: Int32Array.from(latents.of, (at) => (at < 0 ? -1 : inner.length + open.length + at)),
  };
}

function splitRows(problem: BlockProblem, exact: boolean) {
  const { rows } = problem;
  const gaussian: number[] = [];
  const others: number[] = [];
  const factors: Factor[] = [];
  for (let i = 0; i < rows.count; i += 1) {
    const asNormal = rows.kind[i] === ASYMMETRIC && !exact;
    const factor = asNormal ? null : factorOf(rows, i);
    if (factor === null) gaussian.push(i);
    else {
      others.push(i);
      factors.push(factor);
    }
  }
  return {
    gaussian: Int32Array.from(gaussian),
    others: Int32Array.from(others),
    factors,
    bent: [],
  };
}

function fittedRows({ rows }: BlockProblem) {
  const gaussian: number[] = [];
  const bent: BentRow[] = [];
  for (let i = 0; i < rows.count; i += 1) {
    const factor = factorOf(rows, i);
    if (factor !== null && factor.residual === null) continue;
    gaussian.push(i);
    if (factor?.residual) bent.push({ row: i, factor, residual: factor.residual });
  }
  return { gaussian: Int32Array.from(gaussian), others: new Int32Array(0), factors: [], bent };
}

/** Null for normal rows. */
function factorOf(rows: BlockRows, i: number): Factor | null {
  const kind = rows.kind[i]!;
  if (kind === FACTOR) return rows.factors![i]!;
  if (kind === EACH_FLAT) return eachFlatFactor(rows, i);
  return kind === ASYMMETRIC ? asymmetricFactor(rows, i) : null;
}

/** Every row's unknowns, whether their columns are fixed or move. */
interface Entries {
  start: Int32Array;
  unknown: Int32Array;
  source: Int32Array;
}

function entriesOf({ rows, design, varying, atFit }: BlockProblem): Entries {
  const moving = [...varying, ...atFit.map(({ unknown }) => unknown)];
  const start = new Int32Array(rows.count + 1);
  const count = design.column.length + rows.count * moving.length;
  const unknown = new Int32Array(count);
  const source = new Int32Array(count);
  let at = 0;
  for (let i = 0; i < rows.count; i += 1) {
    start[i] = at;
    for (let e = design.start[i]!; e < design.start[i + 1]!; e += 1) {
      unknown[at] = design.column[e]!;
      source[at] = e;
      at += 1;
    }
    for (let d = 0; d < moving.length; d += 1) {
      unknown[at] = moving[d]!;
      source[at] = -1 - d;
      at += 1;
    }
  }
  start[rows.count] = at;
  return { start, unknown: unknown.subarray(0, at), source: source.subarray(0, at) };
}

function seenBy({ start, unknown }: Entries, rows: Int32Array): Set<number> {
  const seen = new Set<number>();
  for (const i of rows) for (let e = start[i]!; e < start[i + 1]!; e += 1) seen.add(unknown[e]!);
  return seen;
}

function patternOf({ start, unknown, source }: Entries, place: Int32Array) {
  const position = new Int32Array(unknown.length);
  for (let e = 0; e < unknown.length; e += 1) position[e] = place[unknown[e]!]!;
  const sources = source.slice();
  for (let i = 0; i + 1 < start.length; i += 1) {
    const begin = start[i]!;
    const end = start[i + 1]!;
    // Rows are short: sorted by insertion.
    for (let e = begin + 1; e < end; e += 1) {
      const p = position[e]!;
      if (position[e - 1]! <= p) continue;
      const s = sources[e]!;
      let to = e;
      for (; to > begin && position[to - 1]! > p; to -= 1) {
        position[to] = position[to - 1]!;
        sources[to] = sources[to - 1]!;
      }
      position[to] = p;
      sources[to] = s;
    }
  }
  return { start, position, source: sources };
}

/** One unknown for each place on a smooth process at which there is a row that isn't Gaussian. */
function latentsOf({ rows }: BlockProblem, others: Int32Array) {
  const of = Array.from(others, () => -1);
  const places: { process: number; x: number }[] = [];
  const at = new Map(Array.from(others, (i, o) => [i, o]));
  rows.smooth.forEach((process, p) => {
    const known = new Map<number, number>();
    process.rows.forEach((i, n) => {
      const other = at.get(i);
      if (other === undefined) return;
      const x = process.x[n]!;
      let place = known.get(x);
      if (place === undefined) {
        place = places.push({ process: p, x }) - 1;
        known.set(x, place);
      }
      of[other] = place;
    });
  });
  return { of, places };
}
