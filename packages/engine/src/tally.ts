import type { Measurement } from "@weighhouse/campaign/document";
import type { Frame } from "./frame";
import { earliestOf, firstDates, noteDates, type FirstDates } from "./order";
import { isValue, type Reading } from "./readings";
import { isOutsideReference } from "./reference-range";

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
  // A derived value is as old as the first of what it is computed from.
  for (const m of frame.measurands[measurand]!.usedBy) noteDates(tally.dates[m]!, measurement);
  if (measurement.setAside !== null) tally.setAside += 1;
  if (reading === null) return;
  tally.counted += 1;
  const { told } = reading;
  const { conditions } = reading;
  if (
    isValue(told) &&
    "y" in told &&
    isOutsideReference(frame, measurand, { y: told.y, conditions })
  ) {
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
