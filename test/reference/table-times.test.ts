import { readFileSync } from "node:fs";
import { describe, expect, test } from "vitest";
import { leapSteps, MJD_OF_1970 } from "@weighhouse/tables/times/leap-seconds";
import { readTime } from "@weighhouse/tables/times/read-time";
import { tdbMinusTt } from "@weighhouse/tables/times/scales";

type Texts = { iso: string; jd: string; mjd: string; jd64: number; mjd64: number };
type Scale = "utc" | "tai" | "tt" | "tdb";
type Instant = Record<Scale, Texts>;

// Computed with astropy 5.2.1 on IAU SOFA (ERFA): see test/reference/README.md.
const { leapSeconds, instants } = JSON.parse(
  readFileSync(new URL("tables/times.json", import.meta.url), "utf8"),
) as { leapSeconds: { from: string; taiMinusUtc: number }[]; instants: Instant[] };

/** What the conversion states. */
const TDB_S = 30e-6;
/** The last digit of astropy's ISO text, and half of the microsecond that a TDB is rounded to. */
const ISO_S = 1.1e-9;
const TDB_ROUNDED_S = 0.5e-6;
/** Half of the spacing of doubles near 2.4e6 days, twice: as written, and as read to its digits. */
const JD64_S = 86_400 * 2 ** -31 * 2;

/** Seconds since 1972, in nanoseconds apart, so that no double has to hold both. */
function instantOf(time: string, leap: boolean): { whole: number; ns: number } {
  const minute = Date.parse(`${time.slice(0, 16)}:00Z`) / 1000 - 63_072_000;
  const offset = leapSeconds.findLast(({ from }) => from <= time)?.taiMinusUtc ?? 0;
  const ns = Number(time.slice(19).replaceAll(/[.Z]/g, "").padEnd(9, "0"));
  return { whole: minute + Number(time.slice(17, 19)) + (leap ? offset : 0), ns };
}

function secondsBetween(from: string, to: string, leap: boolean): number {
  const [a, b] = [instantOf(from, leap), instantOf(to, leap)];
  return b.whole - a.whole + (b.ns - a.ns) * 1e-9;
}

function distance(read: ReturnType<typeof readTime>, utc: string): number {
  if (!read.ok) throw new Error(read.allowed);
  return Math.abs(secondsBetween(utc, read.time, true));
}

test("leap seconds are those of astropy", () => {
  const days = leapSteps.map(({ day, seconds }) => ({
    from: new Date((day - MJD_OF_1970) * 86_400_000).toISOString().slice(0, 10),
    taiMinusUtc: seconds,
  }));
  expect(days).toEqual(leapSeconds.filter(({ from }) => from >= "1972"));
});

/** On the very first instant a rounding leads to the time before, for which there are no steps. */
const since1972 = instants.filter(({ utc }) => utc.iso >= "1972-01-01T00:00:01");
const reading = (scale: Scale, format: "iso" | "jd" | "mjd", offset = 0) => ({
  scale,
  format,
  offset,
});

describe.each(["utc", "tai", "tt", "tdb"] as const)("%s", (scale) => {
  const allowed = ISO_S + (scale === "tdb" ? TDB_S + TDB_ROUNDED_S : 0);

  test("in ISO 8601, to what is stated", () => {
    for (const { utc, ...others } of since1972) {
      const { iso } = { utc, ...others }[scale];
      expect(distance(readTime(iso, reading(scale, "iso")), utc.iso), iso).toBeLessThan(allowed);
    }
  });

  test.each(["jd", "mjd"] as const)("as %s in decimal digits, to the same", (format) => {
    for (const instant of since1972) {
      const read = readTime(instant[scale][format], reading(scale, format));
      expect(distance(read, instant.utc.iso), instant.utc.iso).toBeLessThan(allowed);
    }
  });

  test("as a double, to what it can hold", () => {
    for (const instant of since1972) {
      const read = readTime(String(instant[scale].jd64), reading(scale, "jd"));
      expect(distance(read, instant.utc.iso), instant.utc.iso).toBeLessThan(allowed + JD64_S);
    }
  });
});

test("leap seconds are read and written", () => {
  const within = since1972.filter(({ utc }) => utc.iso.includes(":60"));
  expect(within.length).toBeGreaterThan(4);
  for (const { utc, tt } of within) {
    const read = readTime(tt.iso, reading("tt", "iso"));
    expect(read).toEqual({ ok: true, time: expect.stringContaining(utc.iso.slice(0, 19)) });
  }
});

test("TDB - TT is within 30 microseconds of ERFA's from 1980 to 2050", () => {
  const worst = Math.max(
    ...since1972
      .filter(({ utc }) => utc.iso >= "1980" && utc.iso < "2050")
      .map(({ tt, tdb }) => {
        return Math.abs(secondsBetween(tt.iso, tdb.iso, false) - tdbMinusTt(tt.mjd64));
      }),
  );
  expect(worst).toBeLessThan(TDB_S);
});

// IAU SOFA Time Scale and Calendar Tools cookbook, section on transformations between time scales:
// 2006 January 15 21:24:37.5 UTC is 21:25:10.5 TAI and 21:25:42.684 TT (from memory; times.json
// holds the same steps from the library itself).
test("the SOFA cookbook's example: 2006 January 15", () => {
  const utc = { ok: true, time: "2006-01-15T21:24:37.500Z" };
  expect(readTime("2006-01-15T21:25:10.500", reading("tai", "iso"))).toEqual(utc);
  expect(readTime("2006-01-15T21:25:42.684", reading("tt", "iso"))).toEqual(utc);
});
