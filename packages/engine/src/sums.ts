import type { Frame, MeasurandFrame } from "./frame";
import { addToGroup, createCurveGroup, type CurveGroup, type CurveReading } from "./curve-sums";
import {
  isFactored,
  isKept,
  isSummed,
  isValue,
  type Loading,
  type Reading,
  type Told,
} from "./readings";

/** One independent draw of a shared error: the error's only one, or its draw for one batch. */
export interface Draw {
  error: number;
  batch: string | null;
}

/** Which draws a measurement loads, and how much, in increasing order of draws. */
export interface Pattern {
  /** The batch whose draws are among `draws`; null when none is drawn per batch. */
  batch: string | null;
  draws: number[];
  loadings: number[];
  /** Of each loading: times what is expected, in the observable's unit. */
  relative: boolean[];
}

/** Numbers kept per group and noise class. */
export const WEIGHT = 0;
export const MEAN = 1;
export const SQUARES = 2;
export const LOG_VARIANCE = 3;
export const PER_CLASS = 4;

/**
 * A measurand's measurements in groups of one pattern. Those of a group are together one
 * measurement of their weighted mean: a hypothesis moves that, and never the scatter about it.
 */
export interface MeasurandSums {
  /** The first value. Everything is kept relative to it: on Julian dates plain sums lose all digits. */
  centre: number;
  counted: number;
  provisional: number;
  /** How many of those that count are values that a residual can be taken of. */
  valued: number;
  noises: number;
  /** The pattern of each group, and how many measurements are in it. */
  patterns: number[];
  counts: number[];
  /** Per group, how often its rounding errors may have grown by what was taken out of it; 0: nothing was. */
  wear: number[];
  /**
   * Per group, per noise class, of y minus the centre: sum of 1/v, weighted mean, weighted squares
   * about it, sum of ln v. Longer than its groups need.
   */
  sums: Float64Array;
  /** Readings that no sums can hold, or that a role asks for one by one. */
  kept: Reading[];
  /** Of a curve: see CurveGroup. */
  curves: CurveGroup[];
}

/** All that the measurements say, in a size that hangs on the patterns of loadings, not on their number. */
export interface Sums {
  draws: Draw[];
  patterns: Pattern[];
  measurands: MeasurandSums[];
  /** Ids of the readings that were the first to load a draw or to have a pattern: order hangs on them. */
  firsts: Set<string>;
  /** Places by description; rebuilt when a state is restored. */
  index: SumsIndex;
}

interface SumsIndex {
  draws: Map<string, number>;
  patterns: Map<string, number>;
  /** Patterns by their loadings as a measurement gives them; those of one open draw by error and value. */
  given: Map<string, number>;
  single: Map<number, Map<number, number>>;
  /** Per measurand, groups by pattern. */
  groups: Map<number, number>[];
  /** Per measurand, groups of a curve by batch. */
  batches: Map<string | null, number>[];
}

export function createSums(measurands: readonly MeasurandFrame[]): Sums {
  return indexSums({
    draws: [],
    patterns: [],
    firsts: new Set(),
    measurands: measurands.map(({ noises }) => ({
      centre: 0,
      counted: 0,
      provisional: 0,
      valued: 0,
      noises: noises.length,
      patterns: [],
      counts: [],
      wear: [],
      sums: new Float64Array(noises.length * PER_CLASS),
      kept: [],
      curves: [],
    })),
  });
}

/** The index of sums that came from elsewhere. */
export function indexSums(parts: Omit<Sums, "index">): Sums {
  const { draws, patterns, measurands } = parts;
  return {
    ...parts,
    index: {
      draws: new Map(draws.map((draw, i) => [drawKey(draw), i])),
      patterns: new Map(patterns.map((pattern, i) => [patternKey(pattern), i])),
      given: new Map(),
      single: new Map(),
      groups: measurands.map(
        (measurand) => new Map(measurand.patterns.map((pattern, group) => [pattern, group])),
      ),
      batches: measurands.map(({ curves }) => new Map(curves.map(({ batch }, at) => [batch, at]))),
    },
  };
}

/** Where a group's numbers of one noise class begin in its measurand's sums. */
export function placeOf({ noises }: MeasurandSums, group: number, noise: number): number {
  return (group * noises + noise) * PER_CLASS;
}

/**
 * Adds one reading.
 *
 * @param keptAt its place among those that are kept, if it is; the last if not given
 */
export function addReading(
  sums: Sums,
  reading: Reading,
  frame: Frame,
  keptAt: number | null = null,
): void {
  const own = sums.measurands[reading.measurand]!;
  const { told } = reading;
  const before = sums.draws.length + sums.patterns.length;
  if (own.counted === 0) own.centre = centreOf(told);
  own.counted += 1;
  if (reading.provisional) own.provisional += 1;
  if (isValue(told)) own.valued += 1;
  if (told.form === "value" && isSummed(frame, reading)) {
    const group = groupOf(sums, reading);
    own.counts[group] = (own.counts[group] ?? 0) + 1;
    own.wear[group] ??= 0;
    addValue(own, told, group, frame.measurands[reading.measurand]!);
  } else {
    if (told.form === "value" && isFactored(frame, reading)) {
      const { group, as } = curveGroupOf(sums, reading, { told, frame });
      addToGroup(group, as, frame.measurands[reading.measurand]!);
    } else for (const { error, batch } of reading.loadings) drawIndex(sums, { error, batch });
    if (isKept(frame, reading)) {
      if (keptAt === null) own.kept.push(reading);
      else own.kept.splice(keptAt, 0, reading);
    }
  }
  if (sums.draws.length + sums.patterns.length > before) sums.firsts.add(reading.id);
}

/** What a reading's measurand is centred on where it is the first. */
export function centreOf(told: Told): number {
  if ("y" in told) return told.y;
  return told.form === "linear-noise" ? Math.log10(Math.max(told.value, told.sd)) : 0;
}

/** West's weighted form of Welford's update, once per noise class. */
function addValue(
  own: MeasurandSums,
  { y: value, variance: ownVariance }: { y: number; variance: number },
  group: number,
  { scatterVariance, noises }: MeasurandFrame,
): void {
  const y = value - own.centre;
  const variance = ownVariance + scatterVariance;
  const numbers = own.sums;
  for (let noise = 0; noise < own.noises; noise += 1) {
    const at = placeOf(own, group, noise);
    const v = variance + noises[noise]!;
    const weight = 1 / v;
    const total = numbers[at + WEIGHT]! + weight;
    const distance = y - numbers[at + MEAN]!;
    const mean = numbers[at + MEAN]! + (distance * weight) / total;
    numbers[at + WEIGHT] = total;
    numbers[at + MEAN] = mean;
    numbers[at + SQUARES] = numbers[at + SQUARES]! + weight * distance * (y - mean);
    numbers[at + LOG_VARIANCE] = numbers[at + LOG_VARIANCE]! + Math.log(v);
  }
}

/** The group of a curve that a reading is in, added if new, and the reading as the group takes it. */
export function curveGroupOf(
  sums: Sums,
  reading: Reading,
  { told, frame }: { told: Extract<Told, { form: "value" }>; frame: Frame },
): { group: CurveGroup; as: CurveReading } {
  const { measurand, conditions } = reading;
  const own = sums.measurands[measurand]!;
  const places = sums.index.batches[measurand]!;
  const { batch, draws, loadings } = sortedPattern(sums, reading.loadings);
  let place = places.get(batch);
  if (place === undefined) {
    place = own.curves.push(createCurveGroup(frame.measurands[measurand]!, batch)) - 1;
    places.set(batch, place);
  }
  const { centre } = own;
  const y = told.y - centre;
  return {
    group: own.curves[place]!,
    as: { y, centre, variance: told.variance, conditions, draws, loadings },
  };
}

/** The group of a reading's loadings, added if new. */
export function groupOf(sums: Sums, { measurand, loadings }: Reading): number {
  const groups = sums.index.groups[measurand]!;
  const pattern = patternOf(sums, loadings);
  const there = groups.get(pattern);
  if (there !== undefined) return there;
  const own = sums.measurands[measurand]!;
  const group = own.patterns.push(pattern) - 1;
  groups.set(pattern, group);
  const needed = placeOf(own, group + 1, 0);
  if (needed > own.sums.length) {
    const longer = new Float64Array(2 * needed);
    longer.set(own.sums);
    own.sums = longer;
  }
  return group;
}

function patternOf(sums: Sums, loadings: readonly Loading[]): number {
  const [only, more] = loadings;
  if (only === undefined || more !== undefined || only.batch !== null || only.relative) {
    return patternNamed(sums, loadings);
  }
  const { single } = sums.index;
  let byValue = single.get(only.error);
  if (byValue === undefined) {
    byValue = new Map();
    single.set(only.error, byValue);
  }
  let place = byValue.get(only.value);
  if (place === undefined) {
    place = patternNamed(sums, loadings);
    byValue.set(only.value, place);
  }
  return place;
}

function patternNamed(sums: Sums, loadings: readonly Loading[]): number {
  let given = "";
  for (const { error, batch, value, relative } of loadings) {
    given += `${error} ${value} ${relative ? "*" : ""} ${batch ?? ""};`;
  }
  const there = sums.index.given.get(given);
  if (there !== undefined) return there;
  const pattern = sortedPattern(sums, loadings);
  const key = patternKey(pattern);
  let place = sums.index.patterns.get(key);
  if (place === undefined) {
    place = sums.patterns.push(pattern) - 1;
    sums.index.patterns.set(key, place);
  }
  sums.index.given.set(given, place);
  return place;
}

/** Draws in increasing order, loadings of one draw added up, those that cancel left out. */
function sortedPattern(sums: Sums, loadings: readonly Loading[]): Pattern {
  const byDraw = new Map<number, { value: number; relative: boolean }>();
  for (const { error, batch, value, relative } of loadings) {
    const draw = drawIndex(sums, { error, batch });
    byDraw.set(draw, { value: (byDraw.get(draw)?.value ?? 0) + value, relative });
  }
  const pairs = [...byDraw].filter(([, { value }]) => value !== 0).sort(([a], [b]) => a - b);
  const draws = pairs.map(([draw]) => draw);
  const batch = draws.map((draw) => sums.draws[draw]!.batch).find((one) => one !== null) ?? null;
  return {
    batch,
    draws,
    loadings: pairs.map(([, { value }]) => value),
    relative: pairs.map(([, { relative }]) => relative),
  };
}

function patternKey({ draws, loadings, relative }: Pattern): string {
  return draws.map((draw, i) => `${draw}:${loadings[i]}${relative[i] ? "*" : ""}`).join(";");
}

/** The place of a draw, added if new. */
export function drawIndex(sums: Sums, draw: Draw): number {
  const key = drawKey(draw);
  const there = sums.index.draws.get(key);
  if (there !== undefined) return there;
  sums.index.draws.set(key, sums.draws.length);
  return sums.draws.push(draw) - 1;
}

export function drawKey({ error, batch }: Draw): string {
  return batch === null ? `${error}` : `${error} ${batch}`;
}
