import type { Measurement } from "@weighhouse/campaign/document";
import type { Frame } from "./frame";
import { firstDates, noteDates, type FirstDates } from "./order";
import { isValue, type Reading } from "./readings";

/** A first place and how many there are. */
export interface Places {
  first: number;
  count: number;
}

/** What the standings say of the measurements beside their sums. Places count all measurements. */
export interface Tally {
  size: number;
  counted: number;
  setAside: number;
  dates: FirstDates[];
  /** Counted measurements outside their measurand's reference, per measurand. */
  outside: (Places | null)[];
  /** By key: the first measurement's id, and the others. */
  sameData: Map<string, { id: string; others: Places | null }>;
  /** By measurand and unit. */
  unknownUnits: Map<string, Places & { measurand: number; unit: string }>;
}

/** Beyond this many sd of a normal reference's mean a value lies outside it. */
const OUTSIDE_SD = 4;

export function createTally(frame: Frame): Tally {
  return {
    size: 0,
    counted: 0,
    setAside: 0,
    dates: frame.measurands.map(firstDates),
    outside: frame.measurands.map(() => null),
    sameData: new Map(),
    unknownUnits: new Map(),
  };
}

/** @param reading null for one that is set aside, or whose measurand is closed */
export function noteMeasurement(
  tally: Tally,
  frame: Frame,
  { measurement, reading }: { measurement: Measurement; reading: Reading | null },
): void {
  const place = tally.size;
  tally.size += 1;
  const measurand = frame.measurandIndex.get(measurement.measurand)!;
  noteDates(tally.dates[measurand]!, measurement);
  if (measurement.setAside !== null) tally.setAside += 1;
  if (reading === null) return;
  tally.counted += 1;
  const { told } = reading;
  if (isValue(told) && "y" in told && isOutsideReference(frame, measurand, told.y)) {
    tally.outside[measurand] = oneMore(tally.outside[measurand]!, place);
  }
  if (measurement.sameData !== null) noteSameData(tally, measurement.sameData, measurement.id);
  if (reading.unknownUnit !== null) {
    const unit = reading.unknownUnit;
    const key = `${measurand} ${unit}`;
    const places = oneMore(tally.unknownUnits.get(key) ?? null, place);
    tally.unknownUnits.set(key, { ...places, measurand, unit });
  }
}

function noteSameData(tally: Tally, key: string, id: string): void {
  const there = tally.sameData.get(key);
  if (there === undefined) tally.sameData.set(key, { id, others: null });
  else there.others = oneMore(there.others, tally.size - 1);
}

function oneMore(places: Places | null, place: number): Places {
  return places === null
    ? { first: place, count: 1 }
    : { first: places.first, count: places.count + 1 };
}

/** Whether a value in scoring space lies outside a reference's range, or beyond 4 sd. */
export function isOutsideReference(frame: Frame, measurand: number, y: number): boolean {
  const { lower, upper } = referenceRange(frame, measurand);
  return y < lower || y > upper;
}

/** A reference's bounds, or 4 sd about its mean, in scoring space; unbounded where it has none. */
export function referenceRange(frame: Frame, measurand: number) {
  const reference = frame.measurands[measurand]!.roles[0]!;
  if (reference.kind === "uniform") return { lower: reference.lower, upper: reference.upper };
  if (reference.kind !== "normal") return { lower: -Infinity, upper: Infinity };
  const reach = OUTSIDE_SD * reference.sd;
  return { lower: reference.mean - reach, upper: reference.mean + reach };
}
