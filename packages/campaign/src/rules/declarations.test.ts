import { describe } from "vitest";
import type { Open } from "../testing/documents";
import { check } from "../testing/refusals";

describe("observables", () => {
  check([
    [
      "a circle without its period",
      (document) => delete document.observables[2].period,
      ["/observables/2/period: found nothing; allowed a number above 0"],
    ],
    [
      "a period elsewhere",
      (document) => (document.observables[0].period = 360),
      ["/observables/0/period: found a period on the scale linear; allowed one on cyclic only"],
    ],
    [
      "a condition named like a function or a constant",
      (document) => {
        document.observables[0].conditions.push({ key: "sin" }, { key: "pi" }, { key: "table" });
      },
      ["sin", "pi", "table"].map(
        (name, i) =>
          `/observables/0/conditions/${3 + i}/key: found the name ${name}, which expressions have for their own; allowed no function's or constant's name`,
      ),
    ],
    [
      "time by both epoch and table",
      (document) =>
        (document.observables[0].conditions[1].time.table =
          document.observables[0].conditions[2].time.table),
      [
        "/observables/0/conditions/1/time: found both epoch and table; allowed one of epoch and table",
      ],
    ],
    [
      "time by neither",
      (document) => document.observables[0].conditions.push({ key: "x", time: {} }),
      [
        "/observables/0/conditions/3/time: found neither epoch nor table; allowed one of epoch and table",
      ],
    ],
    [
      "time since an epoch in weeks, and without a unit",
      (document) => {
        const time = { epoch: "2031-03-01T00:00:00Z" };
        document.observables[1].conditions = [
          { key: "x", unit: "week", time },
          { key: "y", time },
        ];
      },
      [
        '/observables/1/conditions/0/unit: found "week"; allowed d, h or s: a time since an epoch is counted in them',
        "/observables/1/conditions/1/unit: found nothing; allowed d, h or s: a time since an epoch is counted in them",
      ],
    ],
    [
      "a table of times out of order",
      (document) =>
        (document.observables[0].conditions[2].time.table[1][0] = "2031-03-01T00:00:00.000Z"),
      [
        "/observables/0/conditions/2/time/table/1/0: found 2031-03-01T00:00:00.000Z; allowed a time after 2031-03-01T00:00:00Z",
      ],
    ],
  ]);
});

describe("references", () => {
  const reference = (index: number, value: Open) => (document: Open) =>
    void (document.measurands[index].reference = value);
  check([
    [
      "none where one is needed",
      reference(5, null),
      [
        "/measurands/5/reference: found nothing; allowed a reference: what one would expect knowing none of the hypotheses",
      ],
    ],
    [
      "one on an event",
      reference(6, { family: "uniform", lower: 0, upper: 1 }),
      [
        "/measurands/6/reference: found a uniform reference on the scale event; allowed none: silence on an event is 1/2",
      ],
    ],
    [
      "gamma where nothing is counted",
      reference(5, { family: "gamma", mean: 1, sd: 1 }),
      [
        "/measurands/5/reference: found a gamma reference on the scale magnitude; allowed uniform, normal, polynomial",
      ],
    ],
    [
      "normal where something is counted",
      reference(7, { family: "normal", mean: 1, sd: 1 }),
      [
        "/measurands/7/reference: found a normal reference on the scale count; allowed gamma, uniform",
      ],
    ],
    [
      "uniform without a width",
      reference(1, { family: "uniform", lower: 20, upper: 20 }),
      ["/measurands/1/reference/upper: found 20; allowed a number above 20"],
    ],
    [
      "normal without a width",
      reference(5, { family: "normal", mean: 1, sd: 0 }),
      ["/measurands/5/reference/sd: found 0; allowed a number above 0"],
    ],
    [
      "more than once around a circle",
      reference(4, { family: "uniform", lower: 10, upper: 200 }),
      ["/measurands/4/reference/upper: found 200; allowed at most 180 from 10, once around"],
    ],
    [
      "once around a circle, and through its end",
      (document) => {
        reference(4, { family: "uniform", lower: 0, upper: 180 })(document);
        document.measurands.push({
          ...document.measurands[4],
          key: "ripple-foot",
          reference: { family: "uniform", lower: 170, upper: 20 },
        });
      },
      [],
    ],
    [
      "of an unknown family",
      reference(5, { family: "cauchy" }),
      [
        '/measurands/5/reference/family: found "cauchy"; allowed "uniform" or "normal" or "polynomial" or "gamma"',
      ],
    ],
    [
      "polynomial without where on its condition",
      (document) => delete document.measurands[0].where,
      [
        '/measurands/0/where: found no range of slope, which the polynomial reference runs over; allowed "slope": [lower, upper]',
      ],
    ],
    [
      "polynomial over an open end",
      (document) => (document.measurands[0].where.slope = [20, null]),
      [
        '/measurands/0/where: found no range of slope, which the polynomial reference runs over; allowed "slope": [lower, upper]',
      ],
    ],
    [
      "polynomial on a constant",
      reference(5, { family: "polynomial", in: "slope", degree: 1, centre: 1, sd: 1 }),
      [
        "/measurands/5/reference: found a polynomial on a constant; allowed uniform or normal, or the shape curve",
        "/measurands/5/reference/in: found the unknown condition slope; allowed no condition: none is declared",
        '/measurands/5/where: found no range of slope, which the polynomial reference runs over; allowed "slope": [lower, upper]',
      ],
    ],
    [
      "a curve of an event, a scattered count",
      (document) => {
        document.measurands[6].shape = "curve";
        document.measurands[7].scatter = 0.1;
      },
      [
        "/measurands/6/shape: found a curve on the scale event; allowed constant",
        "/measurands/7/scatter: found scatter on the scale count; allowed 0",
      ],
    ],
  ]);
});

describe("derived values", () => {
  check([
    [
      "of an unknown measurand, and of nothing",
      (document) => {
        document.derived[0].from.foot = "grain-toe";
        document.derived.push({
          ...document.derived[0],
          key: "grain-none",
          from: {},
          expression: "2 * pi",
        });
      },
      [
        "/derived/0/from/foot: found the unknown measurand grain-toe; allowed pitch-curve, pitch-crest, grain-crest, grain-foot, ripple-crest, shimmer-noon, slide-april, booms-april",
        "/derived/1/expression: found an expression that names no input; allowed names that from declares",
      ],
    ],
    [
      "on an event's scale",
      (document) => (document.derived[0].observable = "slide"),
      [
        "/derived/0/observable: found a derived value on the scale event; allowed an observable on linear, log10, magnitude or cyclic",
        "/hypotheses/1/predictions/2/expected: found expected of an event; allowed a probability",
        "/hypotheses/1/predictions/2/probability: found nothing; allowed a number above 0 and below 1: how probable the event is",
      ],
    ],
    [
      "of an unknown name, with a function's name, of a curve, an event and a derived value",
      (document) => {
        document.derived[0].expression = "crest / foot * wind";
        document.derived[0].from.e = "grain-crest";
        document.derived[0].from.a = "pitch-curve";
        document.derived[0].from.b = "slide-april";
        document.derived[0].from.c = "grain-ratio";
      },
      [
        "/derived/0/from/e: found the name e, which expressions have for their own; allowed no function's or constant's name",
        "/derived/0/from/a: found the curve pitch-curve; allowed a constant measurand with a value",
        "/derived/0/from/b: found the event slide-april; allowed a constant measurand with a value",
        "/derived/0/from/c: found the derived value grain-ratio; allowed a measurand: a derived value has no measurements of its own",
        "/derived/0/expression: found the unknown name wind; allowed crest, foot, e, a, b, c, pi, e, deg",
      ],
    ],
  ]);
});

describe("shared errors", () => {
  const share = (index: number, error: string) => (document: Open) =>
    void (document.measurements[index].shared = [{ error }]);
  check([
    [
      "a draw per batch without a batch",
      share(1, "night-zero"),
      [
        "/measurements/1/batch: found nothing, with the shared error night-zero, drawn per batch; allowed a batch",
      ],
    ],
    [
      "a relative one on a circle",
      share(8, "tuning"),
      [
        "/measurements/8/shared/0/error: found the relative shared error tuning on the scale cyclic; allowed one whose relative is false",
      ],
    ],
    [
      "one of an event",
      share(12, "tuning"),
      [
        "/measurements/12/shared/0/error: found a shared error on the scale event; allowed none: it shifts values",
      ],
    ],
  ]);
});
