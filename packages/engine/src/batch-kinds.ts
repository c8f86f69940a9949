import { placeOf, WEIGHT, type Sums } from "./sums";

/**
 * How a batch's own draws are integrated out. `local`: one measurand alone draws from it. Of those
 * that several draw from, `summed`: by the Schur complement of sums; `rotated`: row by row, where
 * that subtraction would lose more digits than it may.
 */
export type BatchKind = "local" | "summed" | "rotated";

export interface BatchKinds {
  /** Batches in the order in which they first come up. */
  names: string[];
  kinds: BatchKind[];
  /** The batch of each pattern, -1 for none. */
  ofPattern: Int32Array;
  /** Errors drawn per batch, in increasing order: a batch's draws are told apart by them. */
  errors: number[];
}

/**
 * How well a batch's draw may be known from its measurements, in units of its prior information,
 * for its elimination by subtraction to keep eleven digits.
 */
const MOST_BATCH_INFORMATION = 1e5;
/** The same for open draws: what is lost to rounding must be little against their prior. */
const MOST_OPEN_INFORMATION = 1e6;

export function batchKinds(sums: Sums): BatchKinds {
  const { names, ofPattern } = namesOf(sums);
  const crossing = crossedBatches(sums, ofPattern, names.length);
  const known = informationOf(sums, { ofPattern, crossing });
  const stiff = new Uint8Array(names.length);
  let open = 0;
  sums.draws.forEach(({ batch }, draw) => {
    if (batch === null) open = Math.max(open, known[draw]!);
  });
  sums.patterns.forEach(({ draws }, pattern) => {
    const batch = ofPattern[pattern]!;
    if (batch < 0) return;
    for (const draw of draws) {
      const own = sums.draws[draw]!.batch !== null;
      if (own && known[draw]! > MOST_BATCH_INFORMATION) stiff[batch] = 1;
    }
  });
  const kinds = names.map((_, batch): BatchKind => {
    if (crossing[batch] === 0) return "local";
    return stiff[batch] === 1 || open > MOST_OPEN_INFORMATION ? "rotated" : "summed";
  });
  const errors = new Set<number>();
  for (const { error, batch } of sums.draws) if (batch !== null) errors.add(error);
  return { names, kinds, ofPattern, errors: [...errors].sort((a, b) => a - b) };
}

function namesOf({ patterns }: Sums) {
  const places = new Map<string, number>();
  const ofPattern = new Int32Array(patterns.length).fill(-1);
  patterns.forEach(({ batch }, pattern) => {
    if (batch === null) return;
    const place = places.get(batch) ?? places.size;
    places.set(batch, place);
    ofPattern[pattern] = place;
  });
  return { names: [...places.keys()], ofPattern };
}

function crossedBatches(sums: Sums, ofPattern: Int32Array, count: number): Uint8Array {
  const first = new Int32Array(count).fill(-1);
  const crossing = new Uint8Array(count);
  sums.measurands.forEach(({ patterns }, measurand) => {
    for (const pattern of patterns) {
      const batch = ofPattern[pattern]!;
      if (batch < 0) continue;
      if (first[batch] === -1) first[batch] = measurand;
      else if (first[batch] !== measurand) crossing[batch] = 1;
    }
  });
  return crossing;
}

/** Per draw, sum of w u^2 over the groups of crossing batches, in the class of least noise. */
function informationOf(
  sums: Sums,
  { ofPattern, crossing }: { ofPattern: Int32Array; crossing: Uint8Array },
): Float64Array {
  const known = new Float64Array(sums.draws.length);
  for (const own of sums.measurands) {
    own.patterns.forEach((pattern, group) => {
      const batch = ofPattern[pattern]!;
      if (batch < 0 || crossing[batch] === 0) return;
      const weight = own.sums[placeOf(own, group, 0) + WEIGHT]!;
      const { draws, loadings } = sums.patterns[pattern]!;
      for (let i = 0; i < draws.length; i += 1) {
        known[draws[i]!]! += weight * loadings[i]! * loadings[i]!;
      }
    });
  }
  return known;
}
