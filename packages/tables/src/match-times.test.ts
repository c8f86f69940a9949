import { describe, expect, test } from "vitest";
import { readDrafts } from "./testing/harbour";
import type { TimeReading } from "./table-match";

const time = (header: string, cells: string, times: Record<string, TimeReading> = {}) => {
  const read = readDrafts(`${header},value,sd\n${cells},8.1,0.6\n`, { choices: { times } });
  const match = read.matches.find(({ field }) => field === "observedAt");
  return { ...read, match, at: read.rows[0]?.draft?.observedAt };
};

describe("formats, scales and offsets are read off names, units and words beside them", () => {
  test.each([
    ["MJD", "60310.25", "2024-01-01T06:00:00Z"],
    ["mjd_obs", "60310.25", "2024-01-01T06:00:00Z"],
    ["MJD-OBS", "60310.25", "2024-01-01T06:00:00Z"],
    ["JD", "2460310.75", "2024-01-01T06:00:00Z"],
    ["JD [d]", "2460310.75", "2024-01-01T06:00:00Z"],
    ["JD (UTC)", "2460310.75", "2024-01-01T06:00:00Z"],
    ["time [MJD]", "60310.25", "2024-01-01T06:00:00Z"],
    ["JD-2450000", "10310.75", "2024-01-01T06:00:00Z"],
    ["JD - 2400000.5", "60310.25", "2024-01-01T06:00:00Z"],
    ["MJD-50000", "10310.25", "2024-01-01T06:00:00Z"],
    ["RJD", "60310.75", "2024-01-01T06:00:00Z"],
    ["jd_utc", "2460310.75", "2024-01-01T06:00:00Z"],
    ["UTC", "2024-01-01T06:00:00", "2024-01-01T06:00:00Z"],
    ["date (UTC)", "2024-01-01 06:00", "2024-01-01T06:00:00Z"],
    // TT = UTC + 37 s + 32.184 s in 2024 (IERS Bulletin C 52; IAU 1991 Resolution A4).
    ["JD_TT", "2460310.75", "2024-01-01T05:58:50.816Z"],
    ["MJD (TT)", "60310.25", "2024-01-01T05:58:50.816Z"],
    ["time [TAI]", "2024-01-01T06:00:37", "2024-01-01T06:00:00.000Z"],
  ])("%s: %s", (header, cell, expected) => {
    const { at, problems, rows } = time(header, cell);
    expect(problems).toEqual([]);
    expect(rows[0]?.problems).toEqual([]);
    expect(at).toBe(expected);
  });

  test("what is converted or taken is said", () => {
    expect(time("MJD", "60310").match?.conversion).toBe("MJD in UTC to ISO 8601, taken as UTC");
    expect(time("MJD_UTC", "60310").match?.conversion).toBe("MJD in UTC to ISO 8601");
    expect(time("JD_TT", "2460310").match?.conversion).toBe(
      "JD in TT to UTC by TT - TAI = 32.184 s and by leap seconds (IERS Bulletin C, known to 2026-06-28)",
    );
    expect(time("MJD (TDB)", "60310").match?.conversion).toContain("to 30 microseconds");
    expect(time("JD-2450000", "10310").match?.conversion).toContain("JD + 2450000 d");
  });
});

describe("times that aren't the observer's are refused by name, and taken where that is chosen", () => {
  test.each([
    ["BJD", "times counted at the barycenter"],
    ["BJD_TDB", "times counted at the barycenter"],
    ["BTJD", "times counted at the barycenter"],
    ["HJD", "times counted at the heliocenter"],
    ["HMJD", "times counted at the heliocenter"],
    ["MJD (heliocentric)", "times counted at the heliocenter"],
    ["JD (TCB)", "times in the scale TCB"],
    ["MJD_GPS", "times in the scale GPS"],
    ["LST", "times in the scale LST"],
  ])("%s", (header, found) => {
    expect(time(header, "60310").problems).toMatchObject([{ line: null, found }]);
  });

  test("as chosen", () => {
    const reading: TimeReading = { format: "jd", scale: "tdb", offset: 0 };
    const read = time("BJD", "2460310.75", { BJD: reading });
    expect(read.problems).toEqual([]);
    expect(read.match).toMatchObject({ time: reading });
    expect(read.match?.conversion).toContain("as chosen");
    expect(read.at).toMatch(/^2024-01-01T05:58:50\.8\d{5}Z$/);
  });

  test("one at the observer goes before it, and it is kept as extra", () => {
    const { matches, at } = time("BJD,MJD", "2460310.75,60310.25");
    expect(matches.map(({ field }) => field)).toEqual(["extra", "observedAt", "value", "sd"]);
    expect(at).toBe("2024-01-01T06:00:00Z");
  });
});

describe("what could be read two ways is refused", () => {
  test("a number where nothing says what it counts", () => {
    expect(time("time", "60310.25").problems).toEqual([
      {
        line: null,
        column: "time",
        found: "the number 60310.25 where nothing says what it counts",
        allowed:
          "JD or MJD in the column's name or unit, or chosen for it; ISO 8601; or ignore the column",
      },
    ]);
  });

  test("times in seconds", () => {
    expect(time("time [s]", "12").problems).toMatchObject([{ found: "times in s" }]);
  });

  test("a text among Julian Dates, at its row", () => {
    const { rows } = time("MJD", "today");
    expect(rows[0]?.problems).toEqual([
      { column: "MJD", found: '"today"', allowed: "a number: a MJD" },
    ]);
  });

  test("a TT before 1972, when UTC went at another rate", () => {
    expect(time("MJD (TT)", "40000").rows[0]?.problems).toMatchObject([
      { allowed: "a time from 1972-01-01 on in TT; earlier ones in UTC" },
    ]);
    expect(time("MJD", "40000").at).toBe("1968-05-24T00:00:00Z");
  });
});
