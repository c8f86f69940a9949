/**
 * TAI - UTC, in seconds, from the start of a UTC day on. Source: IERS Bulletin C, as its list
 * leap-seconds.list has it that expires on 28 June 2026. UTC before 1972 ran at other rates.
 *
 * Reference values: test/reference/tables/times.json (astropy).
 */
const STEPS: readonly (readonly [string, number])[] = [
  ["1972-01-01", 10],
  ["1972-07-01", 11],
  ["1973-01-01", 12],
  ["1974-01-01", 13],
  ["1975-01-01", 14],
  ["1976-01-01", 15],
  ["1977-01-01", 16],
  ["1978-01-01", 17],
  ["1979-01-01", 18],
  ["1980-01-01", 19],
  ["1981-07-01", 20],
  ["1982-07-01", 21],
  ["1983-07-01", 22],
  ["1985-07-01", 23],
  ["1988-01-01", 24],
  ["1990-01-01", 25],
  ["1991-01-01", 26],
  ["1992-07-01", 27],
  ["1993-07-01", 28],
  ["1994-07-01", 29],
  ["1996-01-01", 30],
  ["1997-07-01", 31],
  ["1999-01-01", 32],
  ["2006-01-01", 33],
  ["2009-01-01", 34],
  ["2012-07-01", 35],
  ["2015-07-01", 36],
  ["2017-01-01", 37],
];

/** The last day for which the list says that no leap second is missing from it. */
export const LEAP_SECONDS_KNOWN_TO = "2026-06-28";

/** The Modified Julian Date of 1970-01-01. */
export const MJD_OF_1970 = 40_587;
const DAY_MS = 86_400_000;

/** The Modified Julian Date of a day, of the Gregorian calendar for all years. */
export function dayOf(date: string): number {
  return Date.parse(`${date}T00:00:00Z`) / DAY_MS + MJD_OF_1970;
}

/** Steps of TAI - UTC by the day (MJD) from which they hold. */
export const leapSteps = STEPS.map(([date, seconds]) => ({ day: dayOf(date), seconds }));

const LONG_DAYS = new Set(leapSteps.slice(1).map(({ day }) => day - 1));

/** Seconds of a UTC day: 86,401 where a leap second ends it. */
export function secondsOfUtcDay(day: number): number {
  return LONG_DAYS.has(day) ? 86_401 : 86_400;
}
