import type { Layout } from "./layout";

/**
 * Rows whose noises hang together: a correlation group, a smooth process, or several of both that
 * share rows.
 */
export interface NoisePart {
  rows: number[];
  /** Indices in the layout's `latents`: values of the processes that are rows of their own. */
  latents: number[];
  groups: number[];
  processes: number[];
  /** Every position that its rows have, in increasing order. */
  positions: Int32Array;
}

/** The Gaussian rows in parts of independent noise. */
export interface NoisePlan {
  singles: Int32Array;
  parts: NoisePart[];
}

export function noisePlanOf(layout: Layout): NoisePlan {
  const { rows } = layout.problem;
  if (rows.groups.length + rows.smooth.length === 0) return { singles: layout.gaussian, parts: [] };
  const gaussian = new Set(layout.gaussian);
  const sets = [...rows.groups, ...rows.smooth].map((one) =>
    one.rows.filter((i) => gaussian.has(i)),
  );
  const parts = new Map<number, NoisePart>();
  const partOf = joined(sets);
  sets.forEach((some, s) => {
    const latents = layout.latents.flatMap((one, l) =>
      one.process === s - rows.groups.length ? [l] : [],
    );
    if (some.length + latents.length === 0) return;
    const root = partOf[s]!;
    const part = parts.get(root) ?? {
      rows: [],
      latents: [],
      groups: [],
      processes: [],
      positions: new Int32Array(0),
    };
    parts.set(root, part);
    part.rows.push(...some);
    part.latents.push(...latents);
    if (s < rows.groups.length) part.groups.push(s);
    else part.processes.push(s - rows.groups.length);
  });
  const tied = new Set(sets.flatMap((some) => [...some]));
  return {
    singles: layout.gaussian.filter((i) => !tied.has(i)),
    parts: [...parts.values()].map((part) => ({
      ...part,
      rows: [...new Set(part.rows)].sort((a, b) => a - b),
      positions: positionsOf(layout, part),
    })),
  };
}

/** For each set, the first set that it is joined with through common rows. */
function joined(sets: readonly Int32Array[]): number[] {
  const parent = sets.map((_, s) => s);
  const rootOf = (s: number): number => (parent[s] === s ? s : rootOf(parent[s]!));
  const first = new Map<number, number>();
  sets.forEach((some, s) => {
    for (const i of some) {
      const there = first.get(i);
      if (there === undefined) first.set(i, s);
      else {
        const [a, b] = [rootOf(there), rootOf(s)];
        parent[Math.max(a, b)] = Math.min(a, b);
      }
    }
  });
  return sets.map((_, s) => rootOf(s));
}

function positionsOf(layout: Layout, { rows, latents }: NoisePart): Int32Array {
  const found = new Set<number>();
  for (const i of rows) {
    for (let e = layout.start[i]!; e < layout.start[i + 1]!; e += 1) found.add(layout.position[e]!);
  }
  for (const l of latents) found.add(layout.latents[l]!.position);
  return Int32Array.from(found).sort();
}

/**
 * Covariance of a part's rows, then of its latents, row by row.
 *
 * @param variance of each row's own noise, by row; for asymmetric rows as it is taken at the moment
 */
export function covarianceOf(
  layout: Layout,
  part: NoisePart,
  variance: Float64Array,
): Float64Array {
  const { rows, latents } = part;
  const size = rows.length + latents.length;
  const matrix = new Float64Array(size * size);
  const place = new Map(rows.map((i, n) => [i, n]));
  rows.forEach((i, n) => (matrix[n * size + n] = variance[i]!));
  for (const g of part.groups) addGroup(layout, { matrix, size, place, variance }, g);
  for (const p of part.processes) {
    const process = layout.problem.rows.smooth[p]!;
    const at: { n: number; x: number }[] = [];
    process.rows.forEach((i, k) => {
      const n = place.get(i);
      if (n !== undefined) at.push({ n, x: process.x[k]! });
    });
    latents.forEach((l, k) => {
      const one = layout.latents[l]!;
      if (one.process === p) at.push({ n: rows.length + k, x: one.x });
    });
    for (const a of at) {
      for (const b of at) {
        const kept = Math.exp(-Math.abs(a.x - b.x) / process.length);
        matrix[a.n * size + b.n]! += process.sd * process.sd * kept;
      }
    }
  }
  return matrix;
}

interface Target {
  matrix: Float64Array;
  size: number;
  place: ReadonlyMap<number, number>;
  variance: Float64Array;
}

function addGroup(layout: Layout, target: Target, g: number): void {
  const { matrix, size, place, variance } = target;
  const { rows } = layout.problem;
  const { rows: members, covariance } = rows.groups[g]!;
  const scale = Array.from(members, (i, n) => {
    const own = covariance[n * members.length + n]!;
    if (!(rows.asymmetric !== null && rows.asymmetric.plus[i]! > 0)) return 1;
    const extra = rows.variance[i]!;
    return Math.sqrt((variance[i]! - extra) / (own - extra));
  });
  members.forEach((i, n) => {
    members.forEach((j, m) => {
      const at = place.get(i)! * size + place.get(j)!;
      const value = covariance[n * members.length + m]!;
      if (i !== j) matrix[at] = value * scale[n]! * scale[m]!;
      else if (scale[n] === 1) matrix[at] = value;
    });
  });
}
