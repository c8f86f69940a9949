import { distanceIn, ellipsoidAround, whiten, withRadius, type Ellipsoid } from "./ellipsoid";
import type { RandomSource } from "./random-source";

const BOOTSTRAPS = 8;
/** And so much more volume: what is cut off of the region makes Z too large. */
const MARGIN = 1.3;
/** Parting must bring the volume down to this share; on the way there it may not rise. */
const WORTHWHILE = 0.7;
const ROUNDS_OF_MEANS = 6;

export interface LivePoints {
  /** n x d. */
  points: Float64Array;
  dimension: number;
  /** ln of the volume that the points are spread over, as far as is known. */
  lnVolume: number;
}

/**
 * Ellipsoids that together enclose points spread over one or more regions.
 *
 * Each ellipsoid is enlarged: to the share of the volume that its points stand for, and by leaving
 * points out at random (bootstrap) until those left out would have been enclosed too. The points
 * are parted in two by 2-means, again and again, where that makes the enlarged volume smaller.
 *
 * Source: Feroz, Hobson & Bridges, MNRAS 398 (2009) 1601, section 5.2 (parting, least volume);
 * Buchner, Statistics and Computing 26 (2016) 383 (enlargement by leaving out).
 */
export function ellipsoidsAround(live: LivePoints, random: RandomSource): Ellipsoid[] {
  const all = Uint32Array.from({ length: live.points.length / live.dimension }, (_, i) => i);
  return part(live, { members: all, ellipsoid: enclosing(live, all, random) }, random);
}

interface Leaf {
  members: Uint32Array;
  ellipsoid: Ellipsoid;
}

function part(live: LivePoints, whole: Leaf, random: RandomSource): Ellipsoid[] {
  const fewest = 3 * live.dimension + 2;
  if (whole.members.length < 2 * fewest) return [whole.ellipsoid];
  let best: Leaf[] = [];
  let least = 1;
  for (const halves of twoMeans(live, whole)) {
    if (halves.some((half) => half.length < fewest)) continue;
    const leaves = halves.map((members) => ({
      members,
      ellipsoid: enclosing(live, members, random),
    }));
    const volume = relativeVolume(
      leaves.map(({ ellipsoid }) => ellipsoid),
      whole,
    );
    if (volume < least) [least, best] = [volume, leaves];
  }
  if (best.length === 0) return [whole.ellipsoid];
  const parts = best.flatMap((leaf) => part(live, leaf, random));
  return relativeVolume(parts, whole) < WORTHWHILE ? parts : [whole.ellipsoid];
}

function relativeVolume(parts: readonly Ellipsoid[], whole: Leaf): number {
  let sum = 0;
  for (const { lnVolume } of parts) sum += Math.exp(lnVolume - whole.ellipsoid.lnVolume);
  return sum;
}

function enclosing(live: LivePoints, members: Uint32Array, random: RandomSource): Ellipsoid {
  const { points, dimension, lnVolume } = live;
  const tight = ellipsoidAround(points, dimension, members);
  const growth = growthOf(live, members, random) * MARGIN ** (1 / dimension);
  const grown = withRadius(tight, tight.radius * growth);
  const share = lnVolume + Math.log((members.length * dimension) / points.length);
  if (grown.lnVolume >= share) return grown;
  return withRadius(grown, grown.radius * Math.exp((share - grown.lnVolume) / dimension));
}

/**
 * Two ways of parting in two: 2-means as the points lie, from two far ends; and in the ellipsoid's
 * own metric, from the ends of the axis along which the points look most like two heaps (least
 * fourth moment).
 */
function twoMeans(
  { points, dimension }: LivePoints,
  { members, ellipsoid }: Leaf,
): Uint32Array[][] {
  const plain = new Float64Array(members.length * dimension);
  const own = new Float64Array(members.length * dimension);
  members.forEach((member, m) => {
    const u = points.subarray(member * dimension, (member + 1) * dimension);
    plain.set(u, m * dimension);
    whiten(ellipsoid, u, own.subarray(m * dimension));
  });
  const far = furthestFrom(plain, dimension, ellipsoid.mean);
  const ends = [far, furthestFrom(plain, dimension, far)];
  return [heaps(members, plain, ends), heaps(members, own, endsOfTwoHeaps(own, dimension))];
}

function endsOfTwoHeaps(z: Float64Array, dimension: number): Float64Array[] {
  let axis = 0;
  let least = Infinity;
  for (let i = 0; i < dimension; i += 1) {
    let second = 0;
    let fourth = 0;
    for (let at = i; at < z.length; at += dimension) {
      second += z[at]! ** 2;
      fourth += z[at]! ** 4;
    }
    const moment = fourth / (second * second);
    if (moment < least) [least, axis] = [moment, i];
  }
  return [-1, 1].map((side) => new Float64Array(dimension).fill(side, axis, axis + 1));
}

function heaps(members: Uint32Array, z: Float64Array, ends: Float64Array[]): Uint32Array[] {
  const dimension = ends[0]!.length;
  let centres = ends;
  const side = new Uint8Array(members.length);
  for (let round = 0; round < ROUNDS_OF_MEANS; round += 1) {
    const sums = [new Float64Array(dimension), new Float64Array(dimension)];
    const counts = [0, 0];
    for (let m = 0; m < members.length; m += 1) {
      const at = m * dimension;
      const to = squareTo(z, at, centres[0]!) <= squareTo(z, at, centres[1]!) ? 0 : 1;
      side[m] = to;
      counts[to]! += 1;
      for (let i = 0; i < dimension; i += 1) sums[to]![i]! += z[at + i]!;
    }
    if (counts[0] === 0 || counts[1] === 0) break;
    centres = sums.map((sum, to) => sum.map((value) => value / counts[to]!));
  }
  return [0, 1].map((to) => members.filter((_, m) => side[m] === to));
}

function squareTo(z: Float64Array, at: number, centre: Float64Array): number {
  let square = 0;
  for (let i = 0; i < centre.length; i += 1) square += (z[at + i]! - centre[i]!) ** 2;
  return square;
}

function furthestFrom(z: Float64Array, dimension: number, centre: Float64Array): Float64Array {
  let best = 0;
  let most = -1;
  for (let at = 0; at < z.length; at += dimension) {
    const square = squareTo(z, at, centre);
    if (square > most) [most, best] = [square, at];
  }
  return z.slice(best, best + dimension);
}

/** By how much the radius must grow for ellipsoids around drawn points to hold those not drawn. */
function growthOf(
  { points, dimension }: LivePoints,
  members: Uint32Array,
  random: RandomSource,
): number {
  let growth = 1;
  for (let round = 0; round < BOOTSTRAPS; round += 1) {
    const drawn = new Uint8Array(members.length);
    const chosen = members.map(() => {
      const m = random.below(members.length);
      drawn[m] = 1;
      return members[m]!;
    });
    const ellipsoid = ellipsoidAround(points, dimension, chosen);
    for (let m = 0; m < members.length; m += 1) {
      if (drawn[m] === 1) continue;
      growth = Math.max(
        growth,
        distanceIn(ellipsoid, points, members[m]! * dimension) / ellipsoid.radius,
      );
    }
  }
  return Math.min(growth, 10);
}
