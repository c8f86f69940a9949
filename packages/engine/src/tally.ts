import type { Measurement } from "@weighhouse/campaign/document";
import type { Frame } from "./frame";
import { earliestOf, firstDates, noteDates, type FirstDates } from "./order";
import { isValue, type Reading } from "./readings";
import { isOutsideReference } from "./reference-range";

/**
 * What the standings say of the measurements beside their sums. Places count all measurements of the
 * document, in increasing order; those of few are kept, so that what is taken out leaves no trace.
 */
export interface Tally {
  size: number;
  counted: number;
  setAside: number;
  dates: FirstDates[];
  /** Counted measurements outside their measurand's reference, per measurand. */
  outside: number[][];
  /** By key, those that count. */
  sameData: Map<string, { place: number; id: string }[]>;
  /** By measurand and unit. */
  unknownUnits: Map<string, { places: number[]; measurand: number; unit: string }>;
}

export function createTally(frame: Frame): Tally {
  return {
    size: 0,
    counted: 0,
    setAside: 0,
    dates: frame.measurands.map((one) =>
      one.derived === null
        ? firstDates(one)
        : earliestOf(one.derived.from.map(({ measurand }) => frame.measurands[measurand]!)),
    ),
    outside: frame.measurands.map(() => []),
    sameData: new Map(),
    unknownUnits: new Map(),
  };
}

/** @param reading null for one that is set aside, or whose measurand is closed */
export function noteMeasurement(
  tally: Tally,
  frame: Frame,
  measurement: Measurement,
  reading: Reading | null,
): void {
  tally.size += 1;
  noteAt(tally, frame, measurement, reading, tally.size - 1);
}

/** Notes a measurement that takes a place which another has left. */
export function noteAt(
  tally: Tally,
  frame: Frame,
  measurement: Measurement,
  reading: Reading | null,
  place: number,
): void {
  const measurand = frame.measurandIndex.get(measurement.measurand)!;
  noteDates(tally.dates[measurand]!, measurement);
  // A derived value is as old as the first of what it is computed from.
  for (const m of frame.measurands[measurand]!.usedBy) noteDates(tally.dates[m]!, measurement);
  if (measurement.setAside !== null) tally.setAside += 1;
  if (reading === null) return;
  tally.counted += 1;
  if (isOutside(frame, reading)) putInOrder(tally.outside[measurand]!, place, (one) => one);
  const { sameData, id } = measurement;
  if (sameData !== null) {
    const there = tally.sameData.get(sameData) ?? [];
    putInOrder(there, { place, id }, (one) => one.place);
    tally.sameData.set(sameData, there);
  }
  const { unknownUnit: unit } = reading;
  if (unit !== null) {
    const key = `${measurand} ${unit}`;
    const there = tally.unknownUnits.get(key) ?? { measurand, unit, places: [] };
    putInOrder(there.places, place, (one) => one);
    tally.unknownUnits.set(key, there);
  }
}

/**
 * Takes a measurement back. Its dates stay: what was posted once was posted (section 8 of the
 * statistics).
 */
export function forgetMeasurement(
  tally: Tally,
  frame: Frame,
  measurement: Measurement,
  reading: Reading | null,
  place: number,
): void {
  const measurand = frame.measurandIndex.get(measurement.measurand)!;
  if (measurement.setAside !== null) tally.setAside -= 1;
  if (reading === null) return;
  tally.counted -= 1;
  tally.outside[measurand] = tally.outside[measurand]!.filter((one) => one !== place);
  const { sameData } = measurement;
  if (sameData !== null) {
    const others = tally.sameData.get(sameData)!.filter((one) => one.place !== place);
    if (others.length === 0) tally.sameData.delete(sameData);
    else tally.sameData.set(sameData, others);
  }
  if (reading.unknownUnit !== null) {
    const key = `${measurand} ${reading.unknownUnit}`;
    const there = tally.unknownUnits.get(key)!;
    there.places = there.places.filter((one) => one !== place);
    if (there.places.length === 0) tally.unknownUnits.delete(key);
  }
}

/**
 * Closes up the places that measurements have left for good, and puts what is listed by its first
 * place in that order again.
 *
 * @param left in increasing order
 */
export function closeUp(tally: Tally, left: readonly number[]): void {
  tally.size -= left.length;
  const moved = (place: number) => place - left.filter((one) => one < place).length;
  tally.outside = tally.outside.map((places) => places.map(moved));
  const data = [...tally.sameData].map(
    ([key, some]) => [key, some.map((one) => ({ ...one, place: moved(one.place) }))] as const,
  );
  tally.sameData = new Map(data.sort(([, a], [, b]) => a[0]!.place - b[0]!.place));
  const units = [...tally.unknownUnits].map(
    ([key, one]) => [key, { ...one, places: one.places.map(moved) }] as const,
  );
  tally.unknownUnits = new Map(units.sort(([, a], [, b]) => a.places[0]! - b.places[0]!));
}

function isOutside(frame: Frame, { told, measurand, conditions }: Reading): boolean {
  return (
    isValue(told) && "y" in told && isOutsideReference(frame, measurand, { y: told.y, conditions })
  );
}

function putInOrder<T>(list: T[], one: T, placeOf: (one: T) => number): void {
  let at = list.length;
  while (at > 0 && placeOf(list[at - 1]!) > placeOf(one)) at -= 1;
  list.splice(at, 0, one);
}
