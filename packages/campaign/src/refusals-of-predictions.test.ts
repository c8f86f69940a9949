import { describe, expect, test } from "vitest";
import { problemLine } from "./problem";
import { problemsAfter } from "./testing/documents";
import type { Open } from "./testing/documents";

/** As `refusals.test.ts`, for what is declared and what is predicted. */
type Case = [rule: string, change: (document: Open) => void, lines: string[]];

function check(cases: Case[]): void {
  test.each(cases)("%s", (_rule, change, lines) => {
    expect(problemsAfter(change).map(problemLine)).toEqual(lines);
  });
}

const slip = (change: (hypothesis: Open) => void) => (document: Open) =>
  void change(document.hypotheses[0]);
const predict = (index: number, fields: Open) => (document: Open) =>
  void Object.assign(document.hypotheses[0].predictions[index], fields);
const place = (index: number) => `/hypotheses/0/predictions/${index}`;

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
        "/derived/0/from/c: found the unknown measurand grain-ratio; allowed pitch-curve, pitch-crest, grain-crest, grain-foot, ripple-crest, shimmer-noon, slide-april, booms-april",
        "/derived/0/expression: found the unknown name wind; allowed crest, foot, e, a, b, c, pi, e, deg",
      ],
    ],
  ]);
});

describe("priors", () => {
  const prior = (value: Open) => slip((hypothesis) => (hypothesis.parameters[0].prior = value));
  const at = "/hypotheses/0/parameters/0/prior";
  const positive = "allowed a number above 0";
  check([
    [
      "normal without a width",
      prior({ family: "normal", mean: 1, sd: 0 }),
      [`${at}/sd: found 0; ${positive}`],
    ],
    [
      "lognormal without a width",
      prior({ family: "lognormal", median: 1, sdLog10: 0 }),
      [`${at}/sdLog10: found 0; ${positive}`],
    ],
    [
      "halfnormal without a width",
      prior({ family: "halfnormal", sd: 0 }),
      [`${at}/sd: found 0; ${positive}`],
    ],
    [
      "uniform without a width",
      prior({ family: "uniform", lower: 2, upper: 2 }),
      [`${at}/upper: found 2; allowed a number above 2; a prior without a width is fixed`],
    ],
    [
      "loguniform the wrong way round",
      prior({ family: "loguniform", lower: 3, upper: 2 }),
      [`${at}/upper: found 2; allowed a number above 3; a prior without a width is fixed`],
    ],
    [
      "loguniform from zero",
      prior({ family: "loguniform", lower: 0, upper: 2 }),
      [`${at}/lower: found 0; ${positive}`],
    ],
    ["fixed needs no width", prior({ family: "fixed", value: 2 }), []],
  ]);
});

describe("predictions", () => {
  check([
    [
      "twice for one measurand",
      predict(1, { measurand: "pitch-curve", expected: 3, tolerance: null }),
      [
        `${place(1)}/measurand: found a prediction of pitch-curve a second time; allowed each key once`,
        "/hypotheses/0/toleranceCorrelations/0/a: found the unknown prediction pitch-crest; allowed pitch-curve, grain-crest, grain-foot, ripple-crest, shimmer-noon, slide-april, booms-april",
      ],
    ],
    ...[0, 1, -0.1, 1.2].map((probability): Case => [
      `probability ${probability}`,
      predict(6, { probability }),
      [
        `${place(6)}/probability: found ${probability}; allowed a number above 0 and below 1: nothing is certain beforehand`,
      ],
    ]),
    [
      "an event without a probability, with an expectation",
      predict(6, { probability: null, expected: 1 }),
      [
        `${place(6)}/expected: found expected of an event; allowed a probability`,
        `${place(6)}/probability: found nothing; allowed a number above 0 and below 1: how probable the event is`,
      ],
    ],
    [
      "a probability of a quantity",
      predict(5, { probability: 0.5 }),
      [
        `${place(5)}/probability: found a probability on the scale magnitude; allowed expected, or a tolerance with bounds; a probability is for events`,
      ],
    ],
    [
      "nothing expected",
      predict(4, { expected: null }),
      [
        `${place(4)}/expected: found nothing; allowed a number or an expression, or a tolerance with bounds (interval, atMost, atLeast)`,
      ],
    ],
    ...[
      ["interval", { family: "interval", lower: 1, upper: 2 }] as const,
      ["atMost", { family: "atMost", bound: 100 }] as const,
    ].map(([family, tolerance]): Case => [
      `expected beside ${family}`,
      (document) => {
        predict(1, { tolerance, expected: 80 })(document);
        document.hypotheses[0].toleranceCorrelations = [];
      },
      [
        `${place(1)}/expected: found expected beside the tolerance ${family}; allowed one of the two: such a tolerance says by itself where the value lies`,
      ],
    ]),
    [
      "a one-sided tolerance without a uniform reference",
      predict(5, { tolerance: { family: "atMost", bound: 20 }, expected: null }),
      [
        `${place(5)}/tolerance: found atMost on shimmer-noon, whose reference is normal; allowed a one-sided tolerance where the reference is uniform`,
      ],
    ],
    [
      "a bound beyond the reference",
      (document) => (document.hypotheses[1].predictions[0].tolerance.bound = 20),
      [
        "/hypotheses/1/predictions/0/tolerance/bound: found 20; allowed a bound above the reference's end 20",
      ],
    ],
    [
      "an interval without a width",
      predict(3, { tolerance: { family: "interval", lower: 1, upper: 1 } }),
      [`${place(3)}/tolerance/upper: found 1; allowed a number above 1`],
    ],
    [
      "an interval on a circle that is one point",
      (document) =>
        (document.hypotheses[1].predictions[3].tolerance = {
          family: "interval",
          lower: 10,
          upper: 10,
        }),
      ["/hypotheses/1/predictions/3/tolerance/upper: found 10; allowed another end than 10"],
    ],
    [
      "a one-sided tolerance on a circle",
      predict(4, { tolerance: { family: "atLeast", bound: 2 }, expected: null }),
      [
        `${place(4)}/tolerance: found atLeast on the scale cyclic; allowed normal, interval, splitNormal, or none: exact`,
      ],
    ],
    [
      "a normal tolerance on a rate, a gamma one on a value",
      (document) => {
        predict(7, { tolerance: { family: "normal", sd: 1 }, expected: 3 })(document);
        predict(5, { tolerance: { family: "gamma", mean: 3, sd: 1 }, expected: null })(document);
      },
      [
        `${place(5)}/tolerance: found gamma on the scale magnitude; allowed normal, interval, atMost, atLeast, splitNormal, or none: exact`,
        `${place(7)}/tolerance: found normal on the scale count; allowed gamma, or none: exact`,
      ],
    ],
    [
      "a rate below zero, as a number and as an expression",
      (document) => {
        document.hypotheses[1].predictions[4].expected = -1;
        predict(7, { tolerance: null, expected: "-h" })(document);
      },
      [
        `${place(7)}/expected: found an expression without a value at any parameter tried; allowed a finite value somewhere between the 1 % and 99 % of the priors, at least 0 on the scale count`,
        "/hypotheses/1/predictions/4/expected: found -1; allowed a rate of at least 0",
      ],
    ],
    ["a rate of zero", (document) => (document.hypotheses[1].predictions[4].expected = 0), []],
    [
      "a relative tolerance on a circle",
      predict(4, { tolerance: { family: "normal", sd: 0.1, relative: true } }),
      [
        `${place(4)}/tolerance/relative: found a relative tolerance on the scale cyclic; allowed false`,
      ],
    ],
    [
      "a smooth tolerance without what it runs along",
      predict(0, { tolerance: { family: "normal", sd: 1, sharing: "smooth" } }),
      [
        `${place(0)}/tolerance/in: found nothing; allowed a condition of the observable, for smooth`,
        `${place(0)}/tolerance/length: found nothing; allowed a number above 0, for smooth`,
      ],
    ],
    [
      "a smooth tolerance along an unknown condition",
      predict(0, {
        tolerance: { family: "normal", sd: 1, sharing: "smooth", in: "wind", length: 1 },
      }),
      [`${place(0)}/tolerance/in: found the unknown condition wind; allowed slope, day, humidity`],
    ],
    [
      "a smooth tolerance on a constant",
      (document) => {
        const tolerance = { family: "normal", sd: 1, sharing: "smooth", in: "slope", length: 1 };
        predict(1, { tolerance })(document);
        document.hypotheses[0].toleranceCorrelations = [];
      },
      [
        `${place(1)}/tolerance/sharing: found a smooth tolerance on a constant; allowed common or each`,
      ],
    ],
    [
      "length without smooth",
      predict(4, { tolerance: { family: "normal", sd: 1, length: 2 } }),
      [
        `${place(4)}/tolerance/length: found length with the sharing common; allowed length with smooth only`,
      ],
    ],
    [
      "given what is no event, and given itself",
      (document) => {
        predict(0, { given: { measurand: "pitch-crest", occurred: true } })(document);
        predict(6, { given: { measurand: "slide-april", occurred: true } })(document);
      },
      [
        `${place(0)}/given/measurand: found pitch-crest, on the scale linear; allowed an event's measurand`,
        `${place(6)}/given/measurand: found slide-april, which is predicted itself; allowed another measurand`,
      ],
    ],
    [
      "withheld twice",
      slip((hypothesis) => (hypothesis.withheld = ["grain-ratio", "grain-ratio"])),
      [
        "/hypotheses/0/withheld/1: found the measurand grain-ratio a second time; allowed each key once",
      ],
    ],
  ]);
});

describe("expressions", () => {
  const at = `${place(1)}/expected`;
  const known = "d, f0, n, k, b, h, c";
  const functions =
    "sqrt, exp, log, log10, sin, cos, tan, asin, acos, atan, atan2, abs, min, max, table";
  check([
    [
      "that doesn't parse",
      predict(1, { expected: "f0 +" }),
      [`${at}: found a text that doesn't parse at the end; allowed an expression of the format`],
    ],
    [
      "with unknown names, all at once",
      predict(1, { expected: "f1 + sinc(f2) + table(grit, 1)" }),
      [
        `${at}: found the unknown name f1; allowed ${known}, pi, e, deg`,
        `${at}: found the unknown function sinc; allowed ${functions}`,
        `${at}: found the unknown table grit; allowed grid, plane`,
      ],
    ],
    [
      "with conditions on a constant",
      predict(1, { expected: "f0 * slope" }),
      [
        `${at}: found the condition slope on a constant; allowed no conditions: a constant has one true value; or the shape curve`,
      ],
    ],
    [
      "nowhere finite over the priors",
      predict(1, { expected: "sqrt(-f0)" }),
      [
        `${at}: found an expression without a value at any parameter tried; allowed a finite value somewhere between the 1 % and 99 % of the priors`,
      ],
    ],
    [
      "nowhere inside its table",
      predict(1, { expected: "table(grid, f0 * 100)" }),
      [
        `${at}: found an expression without a value at any parameter tried; allowed a finite value somewhere between the 1 % and 99 % of the priors`,
      ],
    ],
    [
      "nowhere positive on log10",
      predict(2, { expected: "-d" }),
      [
        `${place(2)}/expected: found an expression without a value at any parameter tried; allowed a finite value somewhere between the 1 % and 99 % of the priors, above 0 on the scale log10`,
      ],
    ],
    ["finite at some parameters only", predict(1, { expected: "sqrt(n - 1.9)" }), []],
    ["positive in one ensemble row only", predict(2, { expected: "0.95 - d" }), []],
    [
      "a parameter hides a condition of the curve",
      slip((hypothesis) => {
        hypothesis.parameters[1].key = "day";
        hypothesis.predictions[0].expected = "f0 * (slope / 30) ^ day";
      }),
      [
        "/hypotheses/0/parameters/1/key: found the name day, also a condition of pitch-curve; allowed a name of its own",
      ],
    ],
    [
      "names that expressions have for their own",
      slip((hypothesis) => {
        hypothesis.parameters[4].key = "exp";
        hypothesis.tables[1].key = "max";
        hypothesis.ensemble.columns.pi = [1, 2, 3];
        hypothesis.predictions[0].expected = "f0";
        hypothesis.predictions[1].expected = "f0";
      }),
      [
        "/hypotheses/0/parameters/4/key: found the name exp, which expressions have for their own; allowed no function's or constant's name",
        "/hypotheses/0/ensemble/columns/pi: found the name pi, which expressions have for their own; allowed no function's or constant's name",
        "/hypotheses/0/tables/1/key: found the name max, which expressions have for their own; allowed no function's or constant's name",
      ],
    ],
  ]);
});

describe("tables and ensembles", () => {
  const table = (change: (tables: Open) => void) => slip((hypothesis) => change(hypothesis.tables));
  check([
    [
      "an axis that doesn't rise",
      table((tables) => (tables[0].at[0][2] = 30)),
      ["/hypotheses/0/tables/0/at/0/2: found 30; allowed a number above 30"],
    ],
    [
      "a value too few, a row too many, a row too short",
      table((tables) => {
        tables[0].values = [1, 2];
        tables[1].values = [[1, 2], [3]];
      }),
      [
        "/hypotheses/0/tables/0/values: found a list of 2; allowed one for each of the 3 points",
        "/hypotheses/0/tables/1/values/1: found a list of 1; allowed one for each of the 2 points",
      ],
    ],
    [
      "an axis without a name",
      table((tables) => (tables[0].in = ["slope", "day"])),
      ["/hypotheses/0/tables/0/at: found 1 axes for 2 names; allowed an axis for each name of in"],
    ],
    [
      "columns and weights of other lengths",
      slip(({ ensemble }) => {
        ensemble.columns.g = [1];
        ensemble.weights = [0, 0];
      }),
      [
        "/hypotheses/0/ensemble/columns/g: found a list of 1; allowed 3, as in d",
        "/hypotheses/0/ensemble/weights: found a list of 2; allowed 3, one a row",
        "/hypotheses/0/ensemble/weights: found only zeros; allowed at least one weight above 0",
      ],
    ],
  ]);
});

describe("correlations", () => {
  check([
    [
      "of a tolerance that isn't normal and common",
      slip((hypothesis) => (hypothesis.toleranceCorrelations[0].b = "ripple-crest")),
      [
        "/hypotheses/0/toleranceCorrelations/0/b: found the prediction of ripple-crest; allowed one with a normal tolerance whose sharing is common",
      ],
    ],
    [
      "with itself, and twice in either order",
      (document) => {
        document.correlations = [
          { a: "south:7", b: "south:7", coefficient: 0.1 },
          { a: "south:7", b: "south:10", coefficient: 0.1 },
          { a: "south:10", b: "south:7", coefficient: 0.1 },
        ];
      },
      [
        "/correlations/0/b: found south:7 with itself; allowed two different ones",
        "/correlations/2: found south:10 and south:7 a second time; allowed each pair once",
      ],
    ],
    [
      "of one, and of an event",
      (document) => {
        document.correlations = [{ a: "south:7", b: "mast:1", coefficient: 1 }];
      },
      [
        "/correlations/0/coefficient: found 1; allowed a number above -1 and below 1",
        "/correlations/0/b: found the event or count mast:1; allowed a measurement with a value",
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

describe("reports of an event", () => {
  const report = (id: string, occurred: boolean, fields: Open = {}) => ({
    id,
    measurand: "slide-april",
    occurred,
    ...fields,
  });
  const reports = (list: Open[]) => (document: Open) =>
    void document.measurements.splice(12, 1, ...list);
  const words =
    "allowed efficiencies below 1 or false alarms above 0 that leave one truth possible";
  check([
    [
      "two certain ones that contradict each other",
      reports([report("yes:1", true), report("no:1", false)]),
      [
        `/measurements/13: found no:1 and yes:1, which no truth of slide-april can give together; ${words}`,
      ],
    ],
    [
      "one that nothing can give",
      reports([report("yes:1", true, { efficiency: 0 })]),
      [`/measurements/12: found yes:1, which neither truth of slide-april can give; ${words}`],
    ],
    [
      "a doubtful one beside a certain one",
      reports([report("yes:1", true), report("no:1", false, { efficiency: 0.9 })]),
      [],
    ],
    [
      "the contradicting one set aside",
      reports([report("yes:1", true), report("no:1", false, { setAside: { reason: "fog" } })]),
      [],
    ],
  ]);
});
