import { assert, constantFrom, date, integer, nat, oneof, property, tuple } from "fast-check";
import { describe, expect, test } from "vitest";
import { conditionFromTime } from "./conditions";
import { TIME_PATTERN } from "./fields";
import { compareInstants, earlier, isTime, secondsBetween } from "./instants";

describe("times", () => {
  // RFC 3339, sections 5.6 to 5.8.
  test.each([
    ["1985-04-12T23:20:50.52Z", true],
    ["1990-12-31T23:59:60Z", true],
    ["2000-02-29T00:00:00Z", true],
    ["1900-02-29T00:00:00Z", false],
    ["1990-12-31T15:59:60-08:00", false],
    ["1996-12-19T16:39:57-08:00", false],
    ["1996-12-19T16:39:57", false],
    ["1996-12-19 16:39:57Z", false],
    ["1996-12-19T16:39Z", false],
    ["1996-13-19T16:39:57Z", false],
    ["1996-04-31T16:39:57Z", false],
    ["1996-12-19T25:39:57Z", false],
    ["1996-12-19T16:39:60Z", false],
    ["1996-12-19T16:39:57.Z", false],
  ])("%s: %s", (time, allowed) => {
    expect(TIME_PATTERN.test(time)).toBe(allowed);
  });

  test("are compared as instants, whatever digits they are written with", () => {
    expect(compareInstants("2031-03-01T00:00:00Z", "2031-03-01T00:00:00.000Z")).toBe(0);
    expect(compareInstants("2031-03-01T00:00:00.5Z", "2031-03-01T00:00:00.500000Z")).toBe(0);
    expect(compareInstants("2031-03-01T00:00:00Z", "2031-03-01T00:00:00.000001Z")).toBeLessThan(0);
    expect(compareInstants("2031-03-01T00:00:00.1Z", "2031-03-01T00:00:00.09Z")).toBeGreaterThan(0);
    expect(compareInstants("2031-03-01T00:00:01Z", "2031-03-01T00:00:00.999999Z")).toBeGreaterThan(
      0,
    );
    expect(compareInstants("2016-12-31T23:59:60Z", "2017-01-01T00:00:00Z")).toBeLessThan(0);
  });

  // JavaScript's own dates are the other computation.
  const valid = {
    min: new Date("0001-01-01T00:00:00Z"),
    max: new Date("9999-12-31T23:59:59Z"),
    noInvalidDate: true,
  };
  test("order and difference agree with Date to the millisecond", () => {
    assert(
      property(date(valid), date(valid), (a, b) => {
        const [from, to] = [a.toISOString(), b.toISOString()];
        expect(Math.sign(compareInstants(from, to))).toBe(Math.sign(a.getTime() - b.getTime()));
        // Two fractions of a second are subtracted: rounding below a nanosecond.
        const seconds = (b.getTime() - a.getTime()) / 1000;
        expect(Math.abs(secondsBetween(from, to) - seconds)).toBeLessThan(
          1e-9 + 1e-15 * Math.abs(seconds),
        );
      }),
    );
  });

  test("a microsecond is not lost over a century", () => {
    assert(
      property(nat(999_999), (micros) => {
        const to = `2031-03-01T00:00:00.${String(micros).padStart(6, "0")}Z`;
        const seconds = secondsBetween("1931-03-01T00:00:00Z", to);
        expect(Math.round((seconds - 36_525 * 86_400) * 1e6)).toBe(micros);
      }),
    );
  });

  test("the earlier of two, either of which may be missing", () => {
    const [a, b] = ["2031-03-01T00:00:00Z", "2031-03-01T00:00:00.1Z"];
    expect([
      earlier(a, b),
      earlier(b, a),
      earlier(null, b),
      earlier(a, null),
      earlier(null, null),
    ]).toEqual([a, a, b, a, null]);
  });
});

describe("conditions from time", () => {
  const epoch = (unit: string) => ({ unit, time: { epoch: "2031-03-01T00:00:00Z", table: null } });

  test("count days, hours or seconds since their epoch, before it too", () => {
    expect(conditionFromTime(epoch("d"), "2031-03-02T12:00:00Z")).toBe(1.5);
    expect(conditionFromTime(epoch("h"), "2031-03-02T12:00:00Z")).toBe(36);
    expect(conditionFromTime(epoch("s"), "2031-02-28T23:59:59.75Z")).toBe(-0.25);
  });

  const table: [string, number][] = [
    ["2031-03-01T00:00:00Z", 4],
    ["2031-03-03T00:00:00Z", 8],
    ["2031-03-04T00:00:00Z", 2],
  ];
  test.each([
    ["2031-03-01T00:00:00Z", 4],
    ["2031-03-02T00:00:00Z", 6],
    ["2031-03-03T00:00:00Z", 8],
    ["2031-03-03T12:00:00Z", 5],
    ["2031-03-04T00:00:00.000Z", 2],
    ["2031-02-28T23:59:59.999999Z", null],
    ["2031-03-04T00:00:00.000001Z", null],
  ])("interpolate their table: %s gives %s", (time, value) => {
    expect(conditionFromTime({ unit: "m", time: { epoch: null, table } }, time)).toBe(value);
  });
});

describe("a time without a pattern", () => {
  const part = (most: number) =>
    integer({ min: 0, max: most }).map((n) => String(n).padStart(2, "0"));
  const times = tuple(
    oneof(
      integer({ min: 1896, max: 2105 }).map(String),
      constantFrom("0000", "2000", "99999", "203x"),
    ),
    part(14),
    part(33),
    part(25),
    part(61),
    part(62),
    constantFrom("", ".5", ".123456789", ".1234567890", ".", ".5x"),
    constantFrom("Z", "z", "+00:00", ""),
  ).map(([y, mo, d, h, mi, s, f, z]) => `${y}-${mo}-${d}T${h}:${mi}:${s}${f}${z}`);

  test("is the same as by the pattern", () => {
    let allowed = 0;
    assert(
      property(times, (text) => {
        allowed += isTime(text) ? 1 : 0;
        expect(isTime(text)).toBe(TIME_PATTERN.test(text));
      }),
      { numRuns: 5000, seed: 20310307 },
    );
    expect(allowed).toBeGreaterThan(200);
  });

  test.each([
    "2031-02-29T00:00:00Z",
    "2032-02-29T00:00:00Z",
    "2031-12-31T23:59:60Z",
    "2031-12-31T23:58:60Z",
    "2031-12-31 23:58:00Z",
    "",
  ])("%s", (text) => {
    expect(isTime(text)).toBe(TIME_PATTERN.test(text));
  });
});
