import { LN_SQRT_2PI } from "@weighhouse/numerics/normal";
import { logDiagonal } from "@weighhouse/numerics/triangular-system";
import type { Conditional } from "./conditional";
import type { Layout } from "./layout";
import type { Workbench } from "./workbench";

/**
 * What is left to integrate numerically at given outer values, over w ~ N(0, 1)^r and the flat
 * unknowns f:
 *
 *   exp(ln - |R f - q|^2 / 2) prod_o L_o(centre_o + L_o w + C_o f)
 */
export interface OpenPart {
  ln: number;
  rank: number;
  flats: number;
  /** Row by row, with q last in each: R and q over the flat unknowns. */
  flatSystem: Float64Array;
  centre: Float64Array;
  /** Others x rank, others x flats. */
  normalLoadings: Float64Array;
  flatLoadings: Float64Array;
  /** rank x normals: t = R_nn^-1 (q_n - R_nf f + basis' w). */
  basis: Float64Array;
}

/** Directions that move no row by more than this share of the largest aren't integrated. */
const NO_DIRECTION = 1e-12;

/**
 * The normal unknowns that rows other than Gaussian ones see, turned so that those rows see as few
 * of them as there are: with B = A R_nn^-1 the rows' loadings, an orthonormal basis of B's rows.
 *
 * @param most as many directions; fewer where B has fewer, unless `padded`
 */
export function openPartOf(
  bench: Workbench,
  { ln, eliminated, base }: Conditional,
  { most = Infinity, padded = false }: { most?: number; padded?: boolean } = {},
): OpenPart {
  const { layout } = bench;
  const { tail } = eliminated;
  const normals = layout.open - layout.inner;
  const flats = layout.size - layout.open;
  const width = tail.size + 1;
  const count = layout.others.length;
  const seen = new Float64Array(count * normals);
  const flatLoadings = new Float64Array(count * flats);
  const centre = new Float64Array(count);
  const row = new Float64Array(tail.size);
  for (let o = 0; o < count; o += 1) {
    othersLoadings(bench, o, row);
    // b R_nn = a, then what b takes along to the flat unknowns and to the centre.
    let mean = base[layout.others[o]!]!;
    for (let j = 0; j < normals; j += 1) {
      const b = row[j]! / tail.data[j * width + j]!;
      seen[o * normals + j] = b;
      if (b === 0) continue;
      for (let k = j + 1; k < tail.size; k += 1) row[k]! -= b * tail.data[j * width + k]!;
      mean += b * tail.data[j * width + tail.size]!;
    }
    centre[o] = mean;
    for (let f = 0; f < flats; f += 1) flatLoadings[o * flats + f] = row[normals + f]!;
  }
  const { basis, rank } = basisOf(seen, { count, normals, most, padded });
  const normalLoadings = new Float64Array(count * rank);
  for (let o = 0; o < count; o += 1) {
    for (let r = 0; r < rank; r += 1) {
      let sum = 0;
      for (let j = 0; j < normals; j += 1) sum += seen[o * normals + j]! * basis[r * normals + j]!;
      normalLoadings[o * rank + r] = sum;
    }
  }
  return {
    ln: ln - logDiagonal(tail, 0, normals) - volumeOf(layout),
    rank,
    flats,
    flatSystem: flatRows(tail, normals),
    centre,
    normalLoadings,
    flatLoadings,
    basis,
  };
}

/** ln of the integrand at w and then f in `at` from `from` on. */
export function lnOpen(
  { layout }: Workbench,
  part: OpenPart,
  { at, from }: { at: Float64Array; from: number },
): number {
  const { rank, flats, flatSystem, centre, normalLoadings, flatLoadings } = part;
  const flatsFrom = from + rank;
  let ln = part.ln;
  for (let r = from; r < flatsFrom; r += 1) ln -= (at[r]! * at[r]!) / 2 + LN_SQRT_2PI;
  for (let i = 0; i < flats; i += 1) {
    let residual = -flatSystem[i * (flats + 1) + flats]!;
    for (let k = i; k < flats; k += 1)
      residual += flatSystem[i * (flats + 1) + k]! * at[flatsFrom + k]!;
    ln -= (residual * residual) / 2;
  }
  for (let o = 0; o < centre.length; o += 1) {
    let mu = centre[o]!;
    for (let r = 0; r < rank; r += 1) mu += normalLoadings[o * rank + r]! * at[from + r]!;
    for (let f = 0; f < flats; f += 1) mu += flatLoadings[o * flats + f]! * at[flatsFrom + f]!;
    ln += layout.factors[o]!.ln(mu);
  }
  return ln;
}

/** Loadings of one of the others over the tail's unknowns. */
export function othersLoadings({ layout, state }: Workbench, o: number, row: Float64Array): void {
  const { start, position, source, problem, inner, latentOf } = layout;
  const i = layout.others[o]!;
  row.fill(0);
  for (let e = start[i]!; e < start[i + 1]!; e += 1) {
    const s = source[e]!;
    row[position[e]! - inner]! += s >= 0 ? problem.design.value[s]! : state.columns[-1 - s]![i]!;
  }
  if (latentOf[o]! >= 0) row[latentOf[o]! - inner] = 1;
}

function volumeOf({ bounds }: Layout): number {
  let ln = 0;
  for (const { width } of bounds) ln += Math.log(width);
  return ln;
}

function flatRows({ size, data }: { size: number; data: Float64Array }, normals: number) {
  const flats = size - normals;
  const rows = new Float64Array(flats * (flats + 1));
  for (let i = 0; i < flats; i += 1) {
    const from = (normals + i) * (size + 1) + normals;
    rows.set(data.subarray(from, from + flats + 1), i * (flats + 1));
  }
  return rows;
}

interface Wanted {
  count: number;
  normals: number;
  most: number;
  padded: boolean;
}

/** Gram-Schmidt with pivots, twice over each row so that the basis stays orthonormal. */
function basisOf(rows: Float64Array, { count, normals, most, padded }: Wanted) {
  const limit = Math.min(normals, count, most);
  const basis = new Float64Array(limit * normals);
  const left = rows.slice();
  let largest = 0;
  let rank = 0;
  for (; rank < limit; rank += 1) {
    const { o, norm } = longest(left, { count, normals });
    if (rank === 0) largest = norm;
    if (!(norm > NO_DIRECTION * largest)) break;
    const direction = basis.subarray(rank * normals, (rank + 1) * normals);
    for (let j = 0; j < normals; j += 1) direction[j] = left[o * normals + j]! / norm;
    for (let r = 0; r < rank; r += 1) {
      removeAlong(basis.subarray(r * normals, (r + 1) * normals), direction);
    }
    const length = Math.hypot(...direction);
    for (let j = 0; j < normals; j += 1) direction[j] = direction[j]! / length;
    for (let p = 0; p < count; p += 1) {
      removeAlong(direction, left.subarray(p * normals, (p + 1) * normals));
    }
  }
  if (padded) rank = limit;
  return { basis: basis.subarray(0, rank * normals), rank };
}

function longest(rows: Float64Array, { count, normals }: { count: number; normals: number }) {
  let most = -1;
  let at = 0;
  for (let o = 0; o < count; o += 1) {
    let sum = 0;
    for (let j = 0; j < normals; j += 1) sum += rows[o * normals + j]! ** 2;
    if (sum > most) {
      most = sum;
      at = o;
    }
  }
  return { o: at, norm: Math.sqrt(most) };
}

function removeAlong(direction: Float64Array, vector: Float64Array): void {
  let product = 0;
  for (let j = 0; j < vector.length; j += 1) product += direction[j]! * vector[j]!;
  for (let j = 0; j < vector.length; j += 1) vector[j]! -= product * direction[j]!;
}
