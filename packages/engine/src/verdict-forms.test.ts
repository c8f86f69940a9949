import { describe, expect, test } from "vitest";
import { normalCdf } from "@weighhouse/numerics/normal";
import { documentFrom, standingsFrom } from "./testing/documents";

type Part = Record<string, unknown>;

const observables = [
  { key: "l", title: "L", unit: "m", scale: "linear", conditions: [{ key: "t", unit: "s" }] },
  { key: "g", title: "G", unit: "m", scale: "log10" },
  { key: "c", title: "C", unit: "deg", scale: "cyclic", period: 180 },
  { key: "e", title: "E", scale: "event" },
  { key: "n", title: "N", unit: "1", scale: "count" },
];
const measurands = [
  { key: "x", observable: "l", reference: { family: "uniform", lower: -50, upper: 50 } },
  { key: "y", observable: "g", reference: { family: "uniform", lower: 0.01, upper: 100 } },
  { key: "angle", observable: "c" },
  { key: "rate", observable: "n", reference: { family: "gamma", mean: 10, sd: 10 } },
  { key: "event", observable: "e" },
  {
    key: "curve",
    observable: "l",
    shape: "curve",
    where: { t: [0, 10] },
    reference: { family: "polynomial", in: "t", degree: 1, centre: 0, sd: 10 },
  },
];

/** The row of one prediction, with what the standings say beside it. */
function rowOf(prediction: Part, measurements: Part[], hypothesis: Part = {}, rule: Part = {}) {
  const { measurand } = prediction;
  const { verdicts, hypotheses, warnings } = standingsFrom(
    documentFrom({
      campaign: { key: "k", title: "K", rule },
      observables,
      measurands,
      hypotheses: [{ key: "h", title: "H", predictions: [prediction], ...hypothesis }],
      measurements: measurements.map((one, i) => ({ id: `a${i}`, measurand, ...one })),
    }),
  );
  const codes = warnings.map(({ code }) => code);
  return { ...verdicts[0]!, standing: hypotheses[0]!, codes };
}

const onX = (tolerance: Part, more: Part = {}) => ({ measurand: "x", tolerance, ...more });
const value = (y: number, sd = 0.1) => [{ value: y, sd }];

describe("hard bounds", () => {
  const within = onX({ family: "interval", lower: -2, upper: 2 });

  test("conformance is the probability between them, tension the distance beyond in u", () => {
    const row = rowOf(within, value(1.9));
    expect(row).toMatchObject({ lower: -2, upper: 2, tension: 0 });
    expect(row.conformance).toBeCloseTo(normalCdf(1), 10);
    expect(rowOf(within, value(2.3)).tension).toBeCloseTo(3, 12);
    expect(rowOf(within, value(-2.3)).tension).toBeCloseTo(-3, 12);
  });

  test("fail where the probability beyond is at least 1 - rule.fail / 5: 2.3263 u (normal table)", () => {
    expect(rowOf(within, value(2.232)).verdict).toBe("undecided");
    expect(rowOf(within, value(2.233)).verdict).toBe("fail");
    expect(rowOf(within, value(1.8355)).verdict).toBe("pass");
  });

  test("one-sided ones are unbounded on the other side", () => {
    const atMost = onX({ family: "atMost", bound: 3 });
    expect(rowOf(atMost, value(-40))).toMatchObject({ verdict: "pass", lower: null, upper: 3 });
    expect(rowOf(atMost, value(3.3))).toMatchObject({ verdict: "fail" });
    const atLeast = { measurand: "y", tolerance: { family: "atLeast", bound: 3 } };
    const row = rowOf(atLeast, [{ value: 2, sdDex: 0.05 }]);
    expect(row).toMatchObject({ verdict: "fail", upper: null });
    expect(row.lower).toBeCloseTo(3, 12);
    expect(row.tension).toBeCloseTo(Math.log10(2 / 3) / 0.05, 9);
  });
});

describe("limits only", () => {
  const limit = [{ limit: "upper", value: 4, confidence: 0.95 }];

  test("pass by reference x likelihood", () => {
    const row = rowOf(onX({ family: "interval", lower: -8, upper: 8 }), limit);
    // N(0, 4 / 1.6449) within the reference's far bounds.
    expect(row.conformance).toBeCloseTo(2 * normalCdf((8 * 1.6448536) / 4) - 1, 6);
    expect(row.verdict).toBe("pass");
    expect(row.standing).toMatchObject({ chiSquare: null, degreesOfFreedom: 0, pValue: null });
  });

  test("but not where the reference alone would", () => {
    const row = rowOf(onX({ family: "interval", lower: -49, upper: 49 }), limit);
    expect(row.conformance).toBeGreaterThan(0.99);
    expect(row.verdict).toBe("undecided");
    expect(rowOf(onX({ family: "interval", lower: -49, upper: 49 }), value(0)).verdict).toBe(
      "pass",
    );
  });

  test("a normal tolerance has no chi-square then, and fails by the probability beyond", () => {
    const tolerance = { family: "normal", sd: 1 };
    const row = rowOf(onX(tolerance, { expected: 20 }), limit);
    expect(row.verdict).toBe("fail");
    expect(row.standing.pValue).toBeNull();
  });

  test("an exact prediction is judged by its Bayes factor alone: 10, and a tenth", () => {
    expect(rowOf({ measurand: "x", expected: 0 }, limit).verdict).toBe("pass");
    expect(rowOf({ measurand: "x", expected: 5 }, limit).verdict).toBe("undecided");
    expect(rowOf({ measurand: "x", expected: 12 }, limit).verdict).toBe("fail");
  });
});

describe("two half-normals", () => {
  const split = onX({ family: "splitNormal", plus: 3, minus: 1 }, { expected: 5 });

  test("have the central interval of probability erf(coverage / sqrt 2)", () => {
    const { lower, upper } = rowOf(split, value(5));
    // Below: (2 / 4) Phi((x - 5) / 1) = Phi(-2); above: (6 / 4) Phi((5 - x) / 3) = Phi(-2).
    expect(normalCdf(lower! - 5) / 2).toBeCloseTo(normalCdf(-2), 12);
    expect(1.5 * normalCdf((5 - upper!) / 3)).toBeCloseTo(normalCdf(-2), 12);
  });

  test("tension is counted from their mean in their sd", () => {
    const mean = 5 + Math.sqrt(2 / Math.PI) * 2;
    const variance = (1 - 2 / Math.PI) * 4 + 3;
    expect(rowOf(split, value(7)).tension).toBeCloseTo((7 - mean) / Math.sqrt(variance + 0.01), 10);
  });
});

describe("what hangs on parameters or an ensemble is looked at beforehand", () => {
  const normalPrior = (key: string, mean: number, sd: number) => ({
    key,
    prior: { family: "normal", mean, sd },
  });

  test("linear in normal parameters: the normal of both spreads", () => {
    const row = rowOf(onX({ family: "normal", sd: 0.3 }, { expected: "2 * p + q" }), value(5), {
      parameters: [normalPrior("p", 2, 0.1), normalPrior("q", 1, 0.2)],
    });
    const sd = Math.hypot(0.3, 0.2, 0.2);
    expect(row.lower).toBeCloseTo(5 - 2 * sd, 11);
    expect(row.upper).toBeCloseTo(5 + 2 * sd, 11);
    expect(row.tension).toBeCloseTo(0, 12);
  });

  test("a lognormal one with a tolerance: quantiles of the mixture", () => {
    const parameters = [{ key: "p", prior: { family: "lognormal", median: 3, sdLog10: 0.1 } }];
    const row = rowOf(onX({ family: "normal", sd: 0.2 }, { expected: "p" }), value(3), {
      parameters,
    });
    // Brute force over the parameter's normal deviate.
    const below = (x: number) => {
      let sum = 0;
      for (let z = -8; z < 8; z += 1e-3) {
        sum += normalCdf((x - 3 * 10 ** (0.1 * z)) / 0.2) * Math.exp(-(z * z) / 2) * 1e-3;
      }
      return sum / Math.sqrt(2 * Math.PI);
    };
    expect(below(row.lower!)).toBeCloseTo(normalCdf(-2), 9);
    expect(below(row.upper!)).toBeCloseTo(normalCdf(2), 9);
  });

  test("what turns, and has no value for some: of the rest, where it crosses a level", () => {
    const parameters = [{ key: "p", prior: { family: "normal", mean: 1, sd: 1 } }];
    const prediction = { measurand: "x", expected: "sqrt(p) - p" };
    const { lower, upper } = rowOf(prediction, value(0), { parameters });
    // sqrt p - p > x between the squares of the two roots of r^2 - r + x; p > 0 only.
    const all = normalCdf(1);
    const below = (x: number) => {
      const root = Math.sqrt(Math.max(0, 1 - 4 * x));
      const [r, s] = [(1 - root) / 2, (1 + root) / 2];
      const first = r > 0 ? normalCdf(r * r - 1) - normalCdf(-1) : 0;
      return (first + normalCdf(1 - s * s)) / all;
    };
    expect(below(lower!)).toBeCloseTo(normalCdf(-2), 9);
    expect(below(upper!)).toBeCloseTo(normalCdf(2), 6);
  });

  test("steep at the end of its prior: the logarithm of a half-normal", () => {
    const parameters = [{ key: "p", prior: { family: "halfnormal", sd: 2 } }];
    const row = rowOf({ measurand: "y", expected: "p" }, [{ value: 1, sdDex: 1e-3 }], {
      parameters,
    });
    // E ln |z| = -(gamma + ln 2) / 2 and var ln |z| = pi^2 / 8, of a standard normal z.
    const mean = Math.log10(2) - (0.5772156649015329 + Math.LN2) / 2 / Math.LN10;
    const sd = Math.PI / Math.sqrt(8) / Math.LN10;
    expect(row.tension).toBeCloseTo(-mean / Math.hypot(sd, 1e-3), 6);
  });

  test("two parameters of which one has a value for a part of its prior only", () => {
    const parameters = [
      { key: "p", prior: { family: "halfnormal", sd: 1 } },
      normalPrior("q", 0, 0.25),
    ];
    const tolerance = { family: "normal", sd: 0.05 };
    const prediction = { measurand: "y", expected: "10 ^ q * (p - 1)", tolerance };
    const row = rowOf(prediction, [{ value: 1, sdDex: 0.1 }], { parameters });
    // q and the tolerance are one normal in dex; p - 1 = e^t over t, p a half-normal above 1.
    const sd = Math.hypot(0.25, 0.05);
    const below = (x: number) => {
      let [sum, whole] = [0, 0];
      for (let t = -25; t < 2.2; t += 1e-3) {
        const p = 1 + Math.exp(t);
        const mass = Math.exp(-(p * p) / 2 + t);
        whole += mass;
        sum += mass * normalCdf((Math.log10(x) - t / Math.LN10) / sd);
      }
      return sum / whole;
    };
    expect(below(row.lower!)).toBeCloseTo(normalCdf(-2), 6);
    expect(below(row.upper!)).toBeCloseTo(normalCdf(2), 6);
  });

  test("exactly a uniform one: its own central interval", () => {
    const parameters = [{ key: "p", prior: { family: "uniform", lower: 0, upper: 10 } }];
    const row = rowOf({ measurand: "x", expected: "p" }, value(4), { parameters });
    expect(row.lower).toBeCloseTo(10 * normalCdf(-2), 9);
    expect(row.upper).toBeCloseTo(10 * normalCdf(2), 9);
    expect(row.verdict).toBe("pass");
    expect(row.conformance).toBeGreaterThan(0.99);
  });

  test("an ensemble's rows by their weights: each a normal of the tolerance", () => {
    const ensemble = { columns: { d: [1, 4, 2] }, weights: [1, 1, 2] };
    const row = rowOf(onX({ family: "normal", sd: 0.5 }, { expected: "d" }), value(2), {
      ensemble,
    });
    const below = (x: number) =>
      normalCdf((x - 1) / 0.5) / 4 + normalCdf((x - 4) / 0.5) / 4 + normalCdf((x - 2) / 0.5) / 2;
    expect(below(row.lower!)).toBeCloseTo(normalCdf(-2), 12);
    expect(below(row.upper!)).toBeCloseTo(normalCdf(2), 12);
  });
});

describe("on a circle", () => {
  test("an interval may run through the period's end", () => {
    const prediction = {
      measurand: "angle",
      tolerance: { family: "interval", lower: 170, upper: 5 },
    };
    expect(rowOf(prediction, value(2, 0.5))).toMatchObject({
      verdict: "pass",
      lower: 170,
      upper: 5,
      tension: 0,
    });
    const beyond = rowOf(prediction, value(7, 0.5));
    expect(beyond.verdict).toBe("fail");
    expect(beyond.tension).toBeCloseTo(4, 12);
  });

  test("a normal tolerance is taken at the wrapped difference", () => {
    const tolerance = { family: "normal", sd: 2 };
    const row = rowOf({ measurand: "angle", expected: 179, tolerance }, value(1, 0.5));
    expect(row).toMatchObject({ verdict: "pass", lower: 175, upper: 3 });
    expect(row.tension).toBeCloseTo(2 / Math.hypot(2, 0.5), 12);
  });
});

describe("counts", () => {
  test("an exact rate is judged by its own two-sided p: 2 min(P(<= n), P(>= n))", () => {
    const prediction = { measurand: "rate", expected: 3 };
    // Poisson of mean 6 + 1: P(N >= 19) = 1.1e-4, P(N <= 7) = 0.599 (tables of the distribution).
    expect(rowOf(prediction, [{ count: 7, exposure: 2, background: 1 }]).verdict).toBe("pass");
    const far = rowOf(prediction, [{ count: 19, exposure: 2, background: 1 }]);
    expect(far).toMatchObject({ verdict: "fail", conformance: null, lower: 3, upper: 3 });
  });

  test("a gamma rate has its central interval, and conformance by reference x likelihood", () => {
    const tolerance = { family: "gamma", mean: 30, sd: 5 };
    const prediction = { measurand: "rate", tolerance };
    const row = rowOf(prediction, [{ count: 310, exposure: 10 }]);
    expect(row.verdict).toBe("pass");
    // Reference of shape 1, rate 1 / 10; posterior shape 311, rate 10.1.
    expect(row.value).toBeCloseTo(311 / 10.1, 10);
    expect(row.sd).toBeCloseTo(Math.sqrt(311) / 10.1, 10);
    expect(row.lower! < 21 && row.upper! > 40).toBe(true);
    expect(row.tension).toBeCloseTo((311 / 10.1 - 30) / Math.hypot(5, row.sd!), 9);
    expect(rowOf(prediction, [{ count: 620, exposure: 10 }]).verdict).toBe("fail");
  });
});

describe("events", () => {
  const report = { occurred: true, efficiency: 0.9, falseAlarm: 0.02 };

  test("called ones pass or fail by P(what was called | reports), prior 1/2", () => {
    const yes = rowOf({ measurand: "event", probability: 0.9 }, [report]);
    expect(yes.verdict).toBe("pass");
    expect(yes.conformance).toBeCloseTo(0.9 / 0.92, 12);
    expect(yes).toMatchObject({ value: null, sd: null, lower: null, upper: null, tension: null });
    // B of a call of 0.1 for "no": (0.1 x 0.9 + 0.9 x 0.02) / (0.46) = 0.235 < 1 / sqrt 10.
    expect(rowOf({ measurand: "event", probability: 0.1 }, [report]).verdict).toBe("fail");
    // 0.2: (0.2 x 0.9 + 0.8 x 0.02) / 0.46 = 0.426: the evidence isn't against it enough.
    expect(rowOf({ measurand: "event", probability: 0.2 }, [report]).verdict).toBe("undecided");
  });

  test("what isn't called decides nothing", () => {
    const row = rowOf({ measurand: "event", probability: 0.7 }, [{ occurred: true }]);
    expect(row).toMatchObject({ verdict: "undecided", conformance: null });
  });
});

describe("a conditional prediction", () => {
  const standings = (reports: Part[], measured = true) =>
    standingsFrom(
      documentFrom({
        observables,
        measurands,
        hypotheses: [
          {
            key: "h",
            title: "H",
            predictions: [
              { measurand: "x", expected: 3, given: { measurand: "event", occurred: true } },
            ],
          },
        ],
        measurements: [
          ...(measured ? [{ id: "x", measurand: "x", value: 3, sd: 0.1 }] : []),
          ...reports.map((one, i) => ({ id: `r${i}`, measurand: "event", ...one })),
        ],
      }),
    );

  test("waits for its event, is void where that didn't happen, and is judged where it did", () => {
    expect(standings([]).verdicts[0]).toMatchObject({ verdict: "awaiting", value: null });
    const unsure = [{ occurred: true, efficiency: 0.5, falseAlarm: 0.4 }];
    expect(standings(unsure).verdicts[0]!.verdict).toBe("awaiting");
    const no = standings([{ occurred: false, efficiency: 0.99 }]);
    expect(no.verdicts[0]!.verdict).toBe("void");
    expect(no.hypotheses[0]).toMatchObject({ compared: 0, silent: 2 });
    expect(standings([{ occurred: false, efficiency: 0.99 }], false).verdicts[0]!.verdict).toBe(
      "void",
    );
    const yes = standings([{ occurred: true }]);
    expect(yes.verdicts[0]!.verdict).toBe("pass");
    expect(yes.hypotheses[0]).toMatchObject({ compared: 1, silent: 1 });
  });
});

describe("a curve", () => {
  const line = { measurand: "curve", expected: "1 + 2 * t" };
  const at = (t: number, y: number) => ({ conditions: { t }, value: y, sd: 0.1 });

  test("is judged as exact predictions are, whatever its tolerance", () => {
    const row = rowOf(line, [at(1, 3.05), at(2, 4.9), at(5, 11.1)]);
    expect(row).toMatchObject({
      verdict: "pass",
      conformance: null,
      tension: null,
      value: null,
      sd: null,
      lower: null,
      upper: null,
    });
    expect(rowOf(line, [at(1, 3), at(5, 13)]).verdict).toBe("fail");
    const tolerance = { family: "normal", sd: 2 };
    expect(rowOf({ ...line, tolerance }, [at(1, 3), at(5, 11.1)]).verdict).toBe("pass");
  });
});

describe("warnings of the other forms", () => {
  test("bounds that cover most of the reference are vague; one outside of it is told", () => {
    const vague = onX({ family: "interval", lower: -45, upper: 45 });
    expect(rowOf(vague, value(0)).codes).toEqual(["vague-prediction"]);
    const partly = onX({ family: "interval", lower: -60, upper: 0 });
    expect(rowOf(partly, value(-1)).codes).toEqual(["outside-reference"]);
    const round = {
      measurand: "angle",
      tolerance: { family: "interval", lower: 100, upper: 80 },
    };
    expect(rowOf(round, value(0)).codes).toEqual(["vague-prediction"]);
  });

  test("a measurement of a curve lies outside beyond 4 sd of the polynomial there", () => {
    const measured = (t: number, y: number) =>
      rowOf({ measurand: "curve", expected: "0 * t" }, [{ conditions: { t }, value: y, sd: 99 }]);
    // 10 in the middle, where P_1 = 0; 10 sqrt 2 at the ends.
    expect(measured(5, 41).codes).toContain("outside-reference");
    expect(measured(10, 41).codes).not.toContain("outside-reference");
  });

  test("few rows of an ensemble that carry the evidence", () => {
    const columns = { d: Array.from({ length: 400 }, (_, k) => k / 10 - 20) };
    const row = rowOf({ measurand: "x", expected: "d" }, value(3.02), { ensemble: { columns } });
    expect(row.codes).toContain("approximate-evidence");
    const coarse = rowOf({ measurand: "x", expected: "d" }, value(3.02, 3), {
      ensemble: { columns },
    });
    expect(coarse.codes).not.toContain("approximate-evidence");
  });
});
