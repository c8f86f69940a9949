import type { Frame } from "./frame";
import { takeFromGroup, type CurveGroup } from "./curve-sums";
import { isFactored, isKept, isSummed, isValue, type Reading } from "./readings";
import {
  centreOf,
  curveGroupOf,
  groupOf,
  LOG_VARIANCE,
  MEAN,
  PER_CLASS,
  placeOf,
  SQUARES,
  WEIGHT,
  type MeasurandSums,
  type Sums,
} from "./sums";

/**
 * Where what is left of a group weighs so much less than what was in it, its sums are made anew: each
 * removal multiplies the rounding errors by no more than
 *
 *   max(W / W', n / n', (S + n) / (S' + n'))
 *
 * W the weight, n the count, S the weighted squares about the mean, primes after it; wear is the
 * product, and 1e4 of it takes four digits of sixteen.
 */
const MOST_WEAR = 1e4;

/**
 * Takes one reading out again: West's update backwards, or out of those that are kept.
 *
 * @returns whether its measurand's sums have to be made anew from what is left: too many digits are
 *   lost, or it may be the one that they are centred on
 */
export function takeOut(sums: Sums, reading: Reading, frame: Frame): { worn: boolean } {
  const own = sums.measurands[reading.measurand]!;
  const { told } = reading;
  const centred = centreOf(told) === own.centre;
  own.counted -= 1;
  if (reading.provisional) own.provisional -= 1;
  if (isValue(told)) own.valued -= 1;
  let wear = 0;
  if (told.form === "value" && isSummed(frame, reading)) {
    const group = groupOf(sums, reading);
    wear = subtract(own, { ...told, group }, frame.measurands[reading.measurand]!);
    if (own.counts[group] === 0) drop(sums, reading.measurand, group);
  } else {
    if (told.form === "value" && isFactored(frame, reading)) {
      const { group, as } = curveGroupOf(sums, reading, { told, frame });
      wear = takeFromGroup(group, as, frame.measurands[reading.measurand]!);
      if (group.count === 0) wear = dropCurve(sums, reading.measurand, group);
    }
    if (isKept(frame, reading)) own.kept = own.kept.filter(({ id }) => id !== reading.id);
  }
  const summed = own.patterns.length > 0 || own.curves.length > 0;
  return { worn: (centred && summed) || !(wear <= MOST_WEAR) };
}

/** Where no sums are, the centre is the first reading's, as it would be from the start. */
export function centreAnew(sums: Sums, measurand: number): void {
  const own = sums.measurands[measurand]!;
  if (own.patterns.length > 0 || own.curves.length > 0) return;
  own.centre = own.kept[0] ? centreOf(own.kept[0].told) : 0;
}

/** The wear of the group after it. */
function subtract(
  own: MeasurandSums,
  { y: value, variance: ownVariance, group }: { y: number; variance: number; group: number },
  { scatterVariance, noises }: { scatterVariance: number; noises: readonly number[] },
): number {
  const before = own.counts[group]!;
  const left = before - 1;
  own.counts[group] = left;
  if (left === 0) return 0;
  let ratio = before / left;
  const y = value - own.centre;
  for (let noise = 0; noise < own.noises; noise += 1) {
    const at = placeOf(own, group, noise);
    const v = ownVariance + scatterVariance + noises[noise]!;
    const weight = 1 / v;
    const total = own.sums[at + WEIGHT]!;
    const rest = total - weight;
    const mean = own.sums[at + MEAN]!;
    const meanLeft = mean - ((y - mean) * weight) / rest;
    const squares = own.sums[at + SQUARES]!;
    const squaresLeft = Math.max(squares - weight * (y - mean) * (y - meanLeft), 0);
    own.sums[at + WEIGHT] = rest;
    own.sums[at + MEAN] = meanLeft;
    own.sums[at + SQUARES] = squaresLeft;
    own.sums[at + LOG_VARIANCE] = own.sums[at + LOG_VARIANCE]! - Math.log(v);
    ratio = Math.max(ratio, total / rest, (squares + before) / (squaresLeft + left));
    // Nothing but rounding is left of the weight.
    if (!(rest > 0)) ratio = Infinity;
  }
  own.wear[group] = (own.wear[group]! + 1) * ratio;
  return own.wear[group];
}

function drop(sums: Sums, measurand: number, group: number): void {
  const own = sums.measurands[measurand]!;
  own.patterns.splice(group, 1);
  own.counts.splice(group, 1);
  own.wear.splice(group, 1);
  const length = own.noises * PER_CLASS;
  own.sums.copyWithin(group * length, (group + 1) * length);
  own.sums.fill(0, own.sums.length - length);
  sums.index.groups[measurand] = new Map(own.patterns.map((pattern, place) => [pattern, place]));
}

/** Nothing is left in it that could be worn: 0. */
function dropCurve(sums: Sums, measurand: number, group: CurveGroup): number {
  const own = sums.measurands[measurand]!;
  own.curves = own.curves.filter((one) => one !== group);
  sums.index.batches[measurand] = new Map(own.curves.map(({ batch }, at) => [batch, at]));
  return 0;
}

/** Empties a measurand, to be filled again from what is left of it. */
export function empty(sums: Sums, measurand: number): void {
  const own = sums.measurands[measurand]!;
  own.centre = 0;
  own.counted = 0;
  own.provisional = 0;
  own.valued = 0;
  own.patterns = [];
  own.counts = [];
  own.wear = [];
  own.sums.fill(0);
  own.kept = [];
  own.curves = [];
  sums.index.batches[measurand]!.clear();
  sums.index.groups[measurand]!.clear();
}
