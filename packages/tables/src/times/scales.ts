import { leapSteps, secondsOfUtcDay } from "./leap-seconds";

/** A day as Modified Julian Date, and nanoseconds into it. */
export type DayTime = { day: number; ns: number };

export type TimeScale = "utc" | "tt" | "tai" | "tdb";

const SECOND = 1_000_000_000;
const DAY = 86_400 * SECOND;
const TT_MINUS_TAI = 32_184_000_000;

/**
 * An instant of another time scale in UTC.
 *
 *   TAI = TT - 32.184 s;  UTC = TAI - leap seconds;  TT = TDB - (TDB - TT)
 *
 * TAI and TT exactly (to the nanosecond); TDB to 30 microseconds from 1980 to 2050. Within a leap
 * second the day has more than 86,400 s. Leap seconds past the last known one are taken as none.
 *
 * @returns null before 1972, when UTC didn't differ from TAI by whole seconds
 * Sources: IAU 1991 Resolution A4 (TT), IERS Bulletin C (leap seconds). Reference values:
 * test/reference/tables/times.json (astropy).
 */
export function toUtc(scale: TimeScale, { day, ns }: DayTime): DayTime | null {
  switch (scale) {
    case "utc":
      return { day, ns };
    case "tai":
      return utcFromTai({ day, ns });
    case "tt":
      return utcFromTai(shifted(day, ns - TT_MINUS_TAI));
    case "tdb": {
      const ahead = Math.round(tdbMinusTt(day + ns / DAY) * SECOND);
      return utcFromTai(shifted(day, ns - TT_MINUS_TAI - ahead));
    }
  }
}

/**
 * TDB - TT in seconds at the geocentre.
 *
 *   0.001657 sin g + 0.000022 sin(L - LJ),
 *   g = 357.53 deg + 0.98560028 deg (JD - 2451545.0),
 *   L - LJ = 246.11 deg + 0.90251792 deg (JD - 2451545.0)
 *
 * @param mjd Modified Julian Date in TT or TDB: which makes no difference here
 * @returns within 30 microseconds from 1980 to 2050
 * Source: The Astronomical Almanac for 2009, page B7, as programs that follow it give it.
 * Reference values: test/reference/tables/times.json (ERFA's eraDtdb).
 */
export function tdbMinusTt(mjd: number): number {
  const days = mjd - 51_544.5;
  const g = 357.53 + 0.98560028 * days;
  const fromJupiter = 246.11 + 0.90251792 * days;
  return 0.001657 * sine(g) + 0.000022 * sine(fromJupiter);
}

function sine(degrees: number): number {
  return Math.sin((degrees * Math.PI) / 180);
}

function shifted(day: number, ns: number): DayTime {
  const days = Math.floor(ns / DAY);
  return { day: day + days, ns: ns - days * DAY };
}

function utcFromTai({ day, ns }: DayTime): DayTime | null {
  const index = leapSteps.findLastIndex((step) => elapsed(day, ns, step.day) >= step.seconds);
  const step = leapSteps[index];
  if (step === undefined) return null;
  const utc = shifted(day, ns - step.seconds * SECOND);
  const next = leapSteps[index + 1];
  // In a leap second the next step's day has begun in TAI less the old offset, not less the new one.
  if (next === undefined || utc.day < next.day) return utc;
  return { day: next.day - 1, ns: secondsOfUtcDay(next.day - 1) * SECOND - SECOND + utc.ns };
}

/** Seconds from the start of a day, infinite where it is far away: only their order is asked. */
function elapsed(day: number, ns: number, from: number): number {
  return (day - from) * 86_400 + ns / SECOND;
}
