import { describe, expect, it } from "vitest";
import { campaignDocumentSchema } from "./document";
import { measurandFinder } from "./measurand-of";

// An invented campaign: why a harbour bell rings at night.
const document = campaignDocumentSchema.parse({
  format: "weighhouse-campaign/1",
  campaign: { key: "bell", title: "Bell" },
  observables: [
    {
      key: "loudness",
      title: "Loudness",
      unit: "Pa",
      scale: "linear",
      conditions: [
        { key: "height", unit: "m" },
        { key: "age", unit: "d", time: { epoch: "2031-01-01T00:00:00Z" } },
      ],
    },
    { key: "rings", title: "Rings", scale: "count" },
    { key: "rang", title: "Rang", scale: "event" },
  ],
  measurands: [
    {
      key: "low-spring",
      observable: "loudness",
      window: { from: "2031-03-01T00:00:00Z", to: "2031-06-01T00:00:00Z" },
      where: { height: [0, 5] },
    },
    {
      key: "high-spring",
      observable: "loudness",
      window: { from: "2031-03-01T00:00:00Z", to: "2031-06-01T00:00:00Z" },
      where: { height: [5, null] },
    },
    { key: "old", observable: "loudness", where: { age: [1000, null] } },
    { key: "nightly", observable: "rings" },
    { key: "ever", observable: "rang" },
    { key: "ever-again", observable: "rang" },
    { key: "shut", observable: "rings", closed: { reason: "a mistake" } },
  ],
});
const find = measurandFinder(document as never);
const spring = { observable: "loudness", observedAt: "2031-04-01T00:00:00Z", value: 2 };

describe("a row without a measurand falls in", () => {
  it.each([
    [
      "the one whose ranges hold its conditions",
      { ...spring, conditions: { height: 2 } },
      "low-spring",
    ],
    ["that also by its unit", { ...spring, unit: "kPa", conditions: { height: 6 } }, "high-spring"],
    [
      "one by a condition computed from its time",
      { ...spring, observedAt: "2034-01-01T00:00:00Z" },
      "old",
    ],
    ["the one that is open", { observable: "rings", count: 3 }, "nightly"],
    ["the one of its kind of result, where it names no observable", { count: 3 }, "nightly"],
  ])("%s", (_, row, measurand) => {
    expect(find(row)).toEqual({ measurand });
  });

  it("the window's ends too", () => {
    const ends = ["2031-03-01T00:00:00Z", "2031-06-01T00:00:00.000Z"];
    for (const observedAt of ends) {
      expect(find({ ...spring, observedAt, conditions: { height: 1 } })).toEqual({
        measurand: "low-spring",
      });
    }
  });
});

describe("a row is told why it falls in none", () => {
  it.each([
    [
      "several hold it",
      { ...spring, conditions: { height: 5 } },
      /^several .* low-spring; high-spring$/,
    ],
    ["two can't be told apart", { observable: "rang", occurred: true }, /ever; ever-again/],
    ["it lacks what a range is about", spring, /^no measurand for loudness, at 2031-04-01/],
    ["it has no time", { observable: "loudness", value: 2 }, /without a time/],
    ["its time is none", { ...spring, observedAt: "yesterday" }, /at yesterday/],
    [
      "its unit is of another dimension",
      { ...spring, unit: "kg", conditions: { height: 2 } },
      /^no/,
    ],
    ["its result is of another kind", { observable: "rings", value: 3 }, /^no measurand for rings/],
    ["a condition is unknown there", { ...spring, conditions: { height: 2, depth: 1 } }, /depth 1/],
    ["its observable is unknown", { observable: "taste", value: 1 }, /unknown observable taste/],
  ])("%s", (_, row, found) => {
    expect(find(row)).toMatchObject({ found: expect.stringMatching(found) as string });
  });

  it("with what each would take", () => {
    expect(find(spring)).toMatchObject({
      allowed:
        "low-spring (2031-03-01T00:00:00Z to 2031-06-01T00:00:00Z, height 0 to 5); " +
        "high-spring (2031-03-01T00:00:00Z to 2031-06-01T00:00:00Z, height 5 to any); " +
        "old (age 1000 to any)",
    });
  });
});
