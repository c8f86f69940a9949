import type { MeasurandFrame } from "./frame";
import type { Reading } from "./readings";

/** Numbers kept per noise class: weight, mean, squares, logVariance. */
const PER_CLASS = 4;

/** One independent draw of a shared error: the error's only one, or its draw for one batch. */
export interface Draw {
  error: number;
  batch: string | null;
}

/**
 * Measurements of one measurand that load the same draws alike. Together they are one measurement
 * of their weighted mean: a hypothesis moves that, and never the scatter about it.
 */
export interface Group {
  /** The batch whose draws are among `draws`; null when none is drawn per batch. */
  batch: string | null;
  draws: number[];
  loadings: number[];
  /** Per noise class, of y minus the centre: sum of 1/v, weighted mean, weighted squares about it, sum of ln v. */
  sums: Float64Array;
}

export interface MeasurandSums {
  /** The first value. Everything is kept relative to it: on Julian dates plain sums lose all digits. */
  centre: number;
  counted: number;
  provisional: number;
  groups: Group[];
}

/** All that the measurements say, in a size that hangs on the patterns of loadings, not on their number. */
export interface Sums {
  draws: Draw[];
  measurands: MeasurandSums[];
  /** Places of draws and groups by their description; rebuilt when a state is restored. */
  index: { draws: Map<string, number>; groups: Map<string, Group>[] };
}

export function createSums(measurands: number): Sums {
  const empty = () => ({ centre: 0, counted: 0, provisional: 0, groups: [] });
  return {
    draws: [],
    measurands: Array.from({ length: measurands }, empty),
    index: { draws: new Map(), groups: Array.from({ length: measurands }, () => new Map()) },
  };
}

/** Adds one reading: West's weighted form of Welford's update, once per noise class. */
export function addReading(sums: Sums, reading: Reading, frame: MeasurandFrame): void {
  const own = sums.measurands[reading.measurand]!;
  if (own.counted === 0) own.centre = reading.y;
  own.counted += 1;
  if (reading.provisional) own.provisional += 1;
  const group = groupOf(sums, reading, frame.noises.length);
  const y = reading.y - own.centre;
  const variance = reading.variance + frame.scatterVariance;
  for (let noise = 0; noise < frame.noises.length; noise += 1) {
    const at = noise * PER_CLASS;
    const v = variance + frame.noises[noise]!;
    const weight = 1 / v;
    const total = group.sums[at]! + weight;
    const distance = y - group.sums[at + 1]!;
    const mean = group.sums[at + 1]! + (distance * weight) / total;
    group.sums[at] = total;
    group.sums[at + 1] = mean;
    group.sums[at + 2] = group.sums[at + 2]! + weight * distance * (y - mean);
    group.sums[at + 3] = group.sums[at + 3]! + Math.log(v);
  }
}

export function groupSums(group: Group, noise: number) {
  const at = noise * PER_CLASS;
  return {
    weight: group.sums[at]!,
    mean: group.sums[at + 1]!,
    squares: group.sums[at + 2]!,
    logVariance: group.sums[at + 3]!,
  };
}

function groupOf(sums: Sums, { measurand, loadings }: Reading, noises: number): Group {
  const groups = sums.index.groups[measurand]!;
  const pattern = patternOf(sums, loadings);
  const key = patternKey(pattern);
  let group = groups.get(key);
  if (group === undefined) {
    const batch = pattern.draws.map((draw) => sums.draws[draw]!.batch).find((b) => b !== null);
    group = { ...pattern, batch: batch ?? null, sums: new Float64Array(noises * PER_CLASS) };
    groups.set(key, group);
    sums.measurands[measurand]!.groups.push(group);
  }
  return group;
}

function patternKey({ draws, loadings }: Pick<Group, "draws" | "loadings">): string {
  let key = "";
  for (let i = 0; i < draws.length; i += 1) key += `${draws[i]}:${loadings[i]};`;
  return key;
}

/** Draws in increasing order, loadings of one draw added up, those that cancel left out. */
function patternOf(sums: Sums, loadings: Reading["loadings"]): Pick<Group, "draws" | "loadings"> {
  if (loadings.length === 0) return { draws: [], loadings: [] };
  const byDraw = new Map<number, number>();
  for (const { error, batch, value } of loadings) {
    const draw = drawOf(sums, { error, batch });
    byDraw.set(draw, (byDraw.get(draw) ?? 0) + value);
  }
  const pairs = [...byDraw].filter(([, value]) => value !== 0).sort(([a], [b]) => a - b);
  return { draws: pairs.map(([draw]) => draw), loadings: pairs.map(([, value]) => value) };
}

function drawOf(sums: Sums, draw: Draw): number {
  const key = drawKey(draw);
  const there = sums.index.draws.get(key);
  if (there !== undefined) return there;
  sums.index.draws.set(key, sums.draws.length);
  return sums.draws.push(draw) - 1;
}

function drawKey({ error, batch }: Draw): string {
  return batch === null ? `${error}` : `${error} ${batch}`;
}

/** The index of sums that came from elsewhere. */
export function indexSums({ draws, measurands }: Pick<Sums, "draws" | "measurands">): Sums {
  return {
    draws,
    measurands,
    index: {
      draws: new Map(draws.map((draw, i) => [drawKey(draw), i])),
      groups: measurands.map(
        ({ groups }) => new Map(groups.map((group) => [patternKey(group), group])),
      ),
    },
  };
}
