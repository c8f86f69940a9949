import { expect, test } from "vitest";
import { weAreWrongIf } from "./prediction-words";

const limb = {
  title: "Brightness in May",
  unit: "mag",
  expected: 12,
  interval: { lower: 11.5, upper: 12.5 },
  decisive: false,
};
const exact = {
  ...limb,
  title: "Period",
  unit: "d",
  expected: 3,
  interval: { lower: 3, upper: 3 },
};

test("a prediction with a theory error is wrong outside its interval", () => {
  expect(weAreWrongIf([limb])).toBe(
    "We are wrong if the true value of “Brightness in May” lies outside 11.5 to 12.5 mag.",
  );
});

test("an exact prediction is wrong at any other value", () => {
  expect(weAreWrongIf([exact])).toContain("“Period” is not 3 d");
});

test("decisive predictions come first, and the others only count against", () => {
  expect(weAreWrongIf([limb, { ...exact, decisive: true }])).toBe(
    "We are wrong if the true value of “Period” is not 3 d. It counts against us if the true value of “Brightness in May” lies outside 11.5 to 12.5 mag.",
  );
});

test("a hypothesis silent on everything says so", () => {
  expect(weAreWrongIf([])).toContain("no measurement can show us wrong");
});

test("a plain number has no unit", () => {
  expect(weAreWrongIf([{ ...exact, unit: "1" }])).toMatch(/is not 3\.$/);
});
