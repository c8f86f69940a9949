import { expect, test } from "vitest";
import { problemsAfter } from "../testing/documents";
import type { Open } from "../testing/documents";
import { NEW, add, predict } from "../testing/refusals";

/** One change for each thing that statistics, section 13, refuses, and where it is complained of. */
const wrong: [pointer: string, change: (document: Open) => void][] = [
  ["/measurements/1/plus", (document) => (document.measurements[1].plus = 0)],
  ["/measurements/4/confidence", (document) => (document.measurements[4].confidence = 1.5)],
  ["/measurements/6/sigmas", (document) => (document.measurements[6].sigmas = -1)],
  ["/measurements/7/sd", (document) => (document.measurements[7].sd = 0)],
  ["/measurements/12/efficiency", (document) => (document.measurements[12].efficiency = 2)],
  ["/measurements/13/exposure", (document) => (document.measurements[13].exposure = 0)],
  ["/measurements/5/value", (document) => (document.measurements[5].value = 0)],
  ["/measurements/11/unit", (document) => (document.measurements[11].unit = "kg")],
  [
    "/measurements/0/conditions/slope",
    (document) => (document.measurements[0].conditions.slope = 50),
  ],
  ["/measurements/0/conditions/day", (document) => (document.measurements[0].conditions.day = 3)],
  ["/measurements/9/team", (document) => (document.measurements[9].team = "nobody")],
  [`${NEW}/id`, add({ id: "south:1", measurand: "grain-foot", value: 0.3, sd: 0.1 })],
  ["/facilities/1/key", (document) => (document.facilities[1].key = "north-mast")],
  ["/hypotheses/0/predictions/0/expected", predict(0, { expected: "f0 *" })],
  ["/hypotheses/0/predictions/1/expected", predict(1, { expected: "sqrt(-f0)" })],
  ["/hypotheses/0/predictions/2/expected", predict(2, { expected: "f9" })],
  ["/hypotheses/0/predictions/3/expected", predict(3, { expected: 0.2 })],
  ["/hypotheses/0/predictions/6/probability", predict(6, { probability: 1 })],
  [
    "/hypotheses/0/predictions/5/tolerance",
    predict(5, { expected: null, tolerance: { family: "atLeast", bound: 20 } }),
  ],
  ["/measurands/0/where", (document) => (document.measurands[0].where = {})],
  [
    "/hypotheses/0/parameters/1/prior/upper",
    (document) => {
      document.hypotheses[0].parameters[1].prior.upper = 0.5;
    },
  ],
  [
    "/hypotheses/1/predictions/5/measurand",
    (document) => {
      document.hypotheses[1].predictions.push({ measurand: "booms-april", expected: 4 });
    },
  ],
  ["/campaign", (document) => (document.campaign.mood = "good")],
];

test("everything that is wrong is reported at once, each at its place", () => {
  const problems = problemsAfter((document) => {
    for (const [, change] of wrong) change(document);
  });
  const pointers = problems.map(({ pointer }) => pointer);
  // With no range of slope the one measured outside of it is outside of nothing.
  const told = wrong.map(([pointer]) => pointer).filter((one) => !one.endsWith("/slope"));
  expect(pointers.toSorted()).toEqual(told.toSorted());
});

test.each(wrong)("alone, %s is the first place", (pointer, change) => {
  expect(problemsAfter(change)[0]?.pointer).toBe(pointer);
});
