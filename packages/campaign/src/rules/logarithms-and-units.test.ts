import { describe, expect, test } from "vitest";
import { problemsAfter } from "../testing/documents";
import type { Open } from "../testing/documents";
import { NEW, add, check } from "../testing/refusals";

describe("values that have no logarithm", () => {
  const words = 'allowed a number above 0 on the scale log10; or noise "linear" with sd';
  check([
    [
      "a value of zero",
      add({ measurand: "grain-foot", value: 0, sd: 1 }),
      [`${NEW}/value: found 0; ${words}`],
    ],
    [
      "a value below zero in another unit",
      add({ measurand: "grain-foot", value: -3, sd: 1, unit: "um" }),
      [`${NEW}/value: found -3; ${words}`],
    ],
    [
      "minus as large as the value",
      add({ measurand: "grain-foot", value: 0.3, plus: 0.1, minus: 0.3 }),
      [`${NEW}/minus: found 0.3; allowed a number below the value 0.3 on the scale log10`],
    ],
    [
      "a limit below zero of what was compatible with zero",
      add({ measurand: "pitch-crest", limit: "upper", value: -1, sigmas: 3 }),
      [`${NEW}/value: found -1; allowed a limit above 0: the quantity was compatible with zero`],
    ],
    [
      "an expected value",
      (document) => (document.hypotheses[1].predictions[2].expected = 0),
      [
        "/hypotheses/1/predictions/2/expected: found 0; allowed a number above 0 on the scale log10",
      ],
    ],
    [
      "bounds of a tolerance",
      (document) => {
        document.hypotheses[0].predictions[3].tolerance.lower = -0.1;
        document.hypotheses[1].predictions[1].tolerance.bound = 0;
      },
      [
        "/hypotheses/0/predictions/3/tolerance/lower: found -0.1; allowed a number above 0 on the scale log10",
        "/hypotheses/1/predictions/1/tolerance/bound: found 0; allowed a number above 0 on the scale log10",
      ],
    ],
    [
      "a reference and a threshold",
      (document) => {
        document.measurands[2].reference.mean = 0;
        document.measurands[3].reference.lower = 0;
        document.measurands[3].thresholds = [{ key: "none", value: -2 }];
      },
      [
        "/measurands/2/reference/mean: found 0; allowed a number above 0 on the scale log10",
        "/measurands/3/reference/lower: found 0; allowed a number above 0 on the scale log10",
        "/measurands/3/thresholds/0/value: found -2; allowed a number above 0 on the scale log10",
      ],
    ],
  ]);

  test("minus is held against the value in the observable's unit", () => {
    const change = (minus: number) => (document: Open) => {
      document.observables[1].unit = "K";
      document.measurements.splice(0, 15, {
        id: "new",
        measurand: "grain-foot",
        value: 3,
        plus: 5,
        minus,
        unit: "degC",
      });
      document.correlations = [];
    };
    expect(problemsAfter(change(5))).toEqual([]);
    expect(problemsAfter(change(277))).toMatchObject([{ pointer: "/measurements/0/minus" }]);
  });

  test("a temperature below its own zero has a logarithm in kelvin", () => {
    const change = (document: Open) => {
      document.observables[1].unit = "K";
      document.measurements.splice(0, 15, {
        id: "new",
        measurand: "grain-foot",
        value: -10,
        sd: 1,
        unit: "degC",
      });
      document.correlations = [];
    };
    expect(problemsAfter(change)).toEqual([]);
  });
});

describe("units", () => {
  check([
    [
      "of another dimension",
      (document) => (document.measurements[0].unit = "kg"),
      ["/measurements/0/unit: found the unit kg; allowed Hz or a unit of its dimension"],
    ],
    [
      "none on an observable that needs one",
      (document) => delete document.observables[0].unit,
      ["/observables/0/unit: found nothing; allowed a unit; 1 for a bare number"],
    ],
  ]);

  test("a unit that nobody knows is a label, and no error", () => {
    expect(problemsAfter((document) => (document.measurements[0].unit = "wobbles"))).toEqual([]);
  });
});
