import { describe, expect, test } from "vitest";
import { problemsAfter } from "../testing/documents";
import type { Open } from "../testing/documents";
import { check, place, predict, slip } from "../testing/refusals";

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
    [
      "infinite everywhere",
      predict(1, { expected: "1 / (f0 - f0)" }),
      [
        `${at}: found an expression without a value at any parameter tried; allowed a finite value somewhere between the 1 % and 99 % of the priors`,
      ],
    ],
    [
      "nowhere finite over the range of a condition",
      (document) => {
        predict(0, { expected: "f0 * log(19 - slope)" })(document);
      },
      [
        `${place(0)}/expected: found an expression without a value at any parameter tried; allowed a finite value somewhere between the 1 % and 99 % of the priors`,
      ],
    ],
    [
      "nowhere finite where a condition without a range was measured",
      (document) => {
        document.measurands[0].where = {};
        document.measurands[0].reference = { family: "normal", mean: 80, sd: 20 };
        predict(0, { expected: "f0 * log(30 - slope)" })(document);
      },
      [
        `${place(0)}/expected: found an expression without a value at any parameter tried; allowed a finite value somewhere between the 1 % and 99 % of the priors`,
      ],
    ],
    [
      "nowhere inside its table over the range of a condition",
      predict(0, { expected: "table(grid, slope + 21)" }),
      [
        `${place(0)}/expected: found an expression without a value at any parameter tried; allowed a finite value somewhere between the 1 % and 99 % of the priors`,
      ],
    ],
    // n ends at 1.985 and f0 at 103.263: a corner of a ten-millionth of the box.
    [
      "finite in a narrow corner only",
      predict(1, { expected: "sqrt(n - 1.98499) + sqrt(f0 - 103.2)" }),
      [],
    ],
    [
      "finite within a thousandth of one slope only",
      predict(0, { expected: "f0 + sqrt(1e-8 - (slope - 33.333) ^ 2)" }),
      [],
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

test("a thousand expressions without a value, of the greatest size, are answered in seconds", () => {
  const sum = Array.from({ length: 190 }, () => "f0").join(" + ");
  const problems = problemsAfter((document) => {
    const [hypothesis] = document.hypotheses;
    hypothesis.ensemble.columns.d = Array.from({ length: 1000 }, (_, row) => row);
    hypothesis.ensemble.weights = null;
    hypothesis.predictions = hypothesis.predictions.slice(0, 1);
    hypothesis.toleranceCorrelations = [];
    document.hypotheses.push(
      ...Array.from({ length: 200 }, (_, index) => ({
        ...hypothesis,
        key: `one-of-many-${index}`,
        predictions: [
          "pitch-crest",
          "shimmer-noon",
          "grain-foot",
          "ripple-crest",
          "grain-crest",
        ].map((measurand) => ({ measurand, expected: `sqrt(-1 - d * (${sum}) ^ 2)` })),
      })),
    );
  });
  // The first are refused; what is left when the effort is used up has no answer.
  expect(problems.length).toBeGreaterThan(5);
  expect(problems.length).toBeLessThan(1000);
}, 20_000);

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
      "a row too few in a table that an expression looks values up in",
      (document) => {
        document.hypotheses[0].tables[1].values = [[1, 2]];
        predict(1, { expected: "table(plane, 30, 50) + table(plane, f0, 50)" })(document);
      },
      ["/hypotheses/0/tables/1/values: found a list of 1; allowed one for each of the 2 points"],
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
