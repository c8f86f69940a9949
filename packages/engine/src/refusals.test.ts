import { expect, test } from "vitest";
import { scoreCampaign } from "./score";
import { addMeasurements, createState, serialiseState } from "./state";
import { oneMeasurand } from "./testing/one-measurand";

// What is right by its form and can't be scored: refused by name when a state is made of it.
const noisy = (nights: number) =>
  oneMeasurand({
    scale: "log10",
    prediction: { expected: 2, tolerance: { family: "normal", sd: 0.1 } },
    measurements: Array.from({ length: nights }, (_, i) => ({
      value: 2 + i / 100,
      sd: 0.5,
      noise: "linear",
      batch: `night-${i}`,
      shared: [{ error: "zero" }],
    })),
    document: { sharedErrors: [{ key: "zero", sd: 0.05, per: "batch" }] },
  });

test("more than thirty unknowns that have to be integrated together are refused", () => {
  const state = createState(noisy(32));
  const problems = state.ok ? [] : state.problems;
  // A level or an offset, and 31 draws or more of the zero point.
  expect(problems[0]).toEqual({
    pointer: "/campaign",
    code: "out-of-range",
    found: "33 unknowns that have to be integrated numerically together, of x",
    allowed: "at most 30",
  });
});

test("a measurement that makes them too many is refused, and the state stays good", () => {
  const whole = noisy(31);
  const state = createState({ ...whole, measurements: whole.measurements.slice(0, 28) });
  if (!state.ok) throw new Error(JSON.stringify(state.problems));
  const before = serialiseState(state.value);
  const added = addMeasurements(state.value, whole.measurements.slice(28));
  expect(added.ok ? [] : added.problems.map(({ code }) => code)).toContain("out-of-range");
  expect(serialiseState(state.value)).toBe(before);
});

test("a limit whose noise isn't normal about it has no correlation", () => {
  const scored = scoreCampaign(
    oneMeasurand({
      prediction: { expected: 5 },
      measurements: [
        { value: 6, sd: 1 },
        { limit: "upper", value: 8, sd: 1 },
      ],
      document: { correlations: [{ a: "m0", b: "m1", coefficient: 0.5 }] },
    }),
  );
  expect(scored.ok ? [] : scored.problems).toEqual([
    {
      pointer: "/measurements/1",
      code: "not-applicable",
      found: "a correlation of m1, whose noise isn't normal about its value",
      allowed: "correlations between values",
    },
  ]);
});
