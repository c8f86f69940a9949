import { describe, expect, test } from "vitest";
import {
  followingKey,
  keyFromTitle,
  numberFromText,
  numberToText,
  textOrNull,
  timeFromText,
  timeToText,
} from "./entered-text";

describe("numbers as typed", () => {
  test.each([
    ["1.75", 1.75],
    [" 12 ", 12],
    ["\u22120.4", -0.4],
    ["2e-3", 0.002],
    ["2E\u22123", 0.002],
    [".5", 0.5],
    ["+3", 3],
  ])("%j is the number %d", (text, value) => expect(numberFromText(text)).toBe(value));

  test("an empty field is no number", () => {
    expect(numberFromText("  ")).toBeNull();
    expect(numberFromText(undefined)).toBeNull();
  });

  test.each(["1,75", "12 km", "0x10", "Infinity", "1e", "--1"])(
    "%j stays text, for the schema to refuse",
    (text) => expect(numberFromText(text)).toBe(text),
  );

  test("a number shown and read again is the same number", () => {
    for (const value of [0, -1.5, 1e-12, 2460000.1234, 1e21])
      expect(numberFromText(numberToText(value))).toBe(value);
  });
});

describe("times as typed", () => {
  test.each([
    ["2031-03-01", "2031-03-01T00:00:00Z"],
    ["2031-03-01 09:30", "2031-03-01T09:30:00Z"],
    ["2031-03-01T09:30:12.5Z", "2031-03-01T09:30:12.5Z"],
    ["2031-03-01 09:30 UTC", "2031-03-01T09:30:00Z"],
  ])("%j is %s", (text, time) => expect(timeFromText(text)).toBe(time));

  test("a local offset is left for the schema to refuse: times are UTC", () => {
    expect(timeFromText("2031-03-01T09:30:00+02:00")).toBe("2031-03-01T09:30:00+02:00");
  });

  test("a time shown and read again is the same instant", () => {
    for (const time of ["2031-03-01T00:00:00Z", "2031-03-01T09:30:12Z", "2031-03-01T09:30:12.25Z"])
      expect(timeFromText(timeToText(time))).toBe(time);
    expect(timeToText("2031-03-01T09:30:00.000000Z")).toBe("2031-03-01 09:30");
  });
});

test("a key comes from a title's letters and digits alone", () => {
  expect(keyFromTitle("  Limb, in May: Étude n° 2 ")).toBe("limb-in-may-etude-n-2");
  expect(keyFromTitle("x".repeat(80))).toHaveLength(64);
  expect(keyFromTitle("—")).toBe("");
});

test("blank text is absent", () => {
  expect(textOrNull("  ")).toBeNull();
  expect(textOrNull(" a ")).toBe("a");
});

test("a key follows its title until it is somebody's own", () => {
  expect(followingKey("", { before: "", now: "W" })).toBe("w");
  expect(followingKey("warm", { before: "Warm", now: "Warm bed" })).toBe("warm-bed");
  expect(followingKey("own", { before: "Warm", now: "Warm bed" })).toBe("own");
});
