import { describe, expect, test } from "vitest";
import { documentFrom, standingsFrom } from "./testing/documents";

type Part = Record<string, unknown>;

const uniform = (lower: number, upper: number) => ({ family: "uniform", lower, upper });

const observables = [
  { key: "l", title: "L", unit: "1", scale: "linear" },
  { key: "g", title: "G", unit: "1", scale: "log10" },
  { key: "m", title: "M", unit: "mag", scale: "magnitude" },
];

function campaign({
  scales,
  derived,
  predictions = [],
  measurements,
  more = {},
}: {
  scales: Record<string, string>;
  derived: Part[];
  predictions?: Part[];
  measurements: Part[];
  more?: Part;
}) {
  return documentFrom({
    observables,
    measurands: Object.entries(scales).map(([key, observable]) => ({
      key,
      observable,
      reference: observable === "g" ? uniform(1e-3, 1e3) : uniform(-1000, 1000),
    })),
    derived,
    hypotheses: [{ key: "h", title: "H", predictions }],
    measurements: measurements.map((one, i) => ({ id: `a${i}`, ...one })),
    ...more,
  });
}

const ratio = (more: Part = {}) => ({
  key: "r",
  observable: "l",
  expression: "a / b",
  from: { a: "a", b: "b" },
  reference: uniform(0, 100),
  ...more,
});

const values = [
  { measurand: "a", value: 6, sd: 0.06 },
  { measurand: "b", value: 3, sd: 0.06 },
];

describe("a derived value", () => {
  test("is the expression over the combined values, with J C J'", () => {
    const { measurands, verdicts } = standingsFrom(
      campaign({
        scales: { a: "l", b: "l" },
        derived: [ratio()],
        predictions: [{ measurand: "r", expected: 2, tolerance: { family: "normal", sd: 0.05 } }],
        measurements: [
          { measurand: "a", value: 6.06, sd: 0.06 * Math.SQRT2 },
          { measurand: "a", value: 5.94, sd: 0.06 * Math.SQRT2 },
          values[1]!,
        ],
      }),
    );
    const { combined, key } = measurands.at(-1)!;
    expect(key).toBe("r");
    expect(combined!.value).toBeCloseTo(2, 12);
    const sd = 2 * Math.hypot(0.01, 0.02);
    expect(combined!.sd).toBeCloseTo(sd, 12);
    expect(combined).toMatchObject({ chiSquare: null, degreesOfFreedom: null, birgeRatio: null });
    // Phi(0.1 / sd) - Phi(-0.1 / sd), the interval being 2 -+ 2 x 0.05.
    expect(verdicts[0]).toMatchObject({ value: combined!.value, sd: combined!.sd, tension: 0 });
    expect(verdicts[0]!.conformance).toBeCloseTo(0.974653, 5);
  });

  test("is linearised in scoring spaces: a quotient of logarithms is a difference", () => {
    const { measurands } = standingsFrom(
      campaign({
        scales: { a: "g", b: "g" },
        derived: [ratio({ observable: "g", reference: uniform(0.01, 1000) })],
        measurements: [
          { measurand: "a", value: 60, sdDex: 0.3 },
          { measurand: "b", value: 2, sdDex: 0.4 },
        ],
      }),
    );
    const { combined } = measurands.at(-1)!;
    expect(combined!.value).toBeCloseTo(30, 10);
    expect(combined!.sd).toBeCloseTo(0.5, 12);
  });

  test("carries shared errors through J: what both inputs share cancels in their difference", () => {
    const shared = [{ error: "zero", coefficient: 1 }];
    const { measurands } = standingsFrom(
      campaign({
        scales: { a: "m", b: "m" },
        derived: [ratio({ observable: "m", expression: "a - b", reference: uniform(-9, 9) })],
        measurements: [
          { measurand: "a", value: 20, sd: 0.03, shared },
          { measurand: "b", value: 18, sd: 0.04, shared },
        ],
        more: { sharedErrors: [{ key: "zero", sd: 1 }] },
      }),
    );
    const { combined } = measurands.at(-1)!;
    expect(combined!.value).toBeCloseTo(2, 12);
    expect(combined!.sd).toBeCloseTo(0.05, 12);
  });

  test("takes correlated inputs as they are", () => {
    const { measurands } = standingsFrom(
      campaign({
        scales: { a: "l", b: "l" },
        derived: [ratio({ expression: "a + 2 * b" })],
        measurements: values,
        more: { correlations: [{ a: "a0", b: "a1", coefficient: -0.5 }] },
      }),
    );
    const variance = 0.06 ** 2 * (1 + 4 - 2);
    expect(measurands.at(-1)!.combined!.sd).toBeCloseTo(Math.sqrt(variance), 12);
  });

  test("that curvature shifts by over 5 % of its sd is drawn: median and central 68.27 %", () => {
    // 1 / b, b = N(3, 0.6): quantiles are those of b turned over.
    const { measurands } = standingsFrom(
      campaign({
        scales: { b: "l" },
        derived: [ratio({ expression: "1 / b", from: { b: "b" }, reference: uniform(0, 9) })],
        measurements: [{ measurand: "b", value: 3, sd: 0.6 }],
      }),
    );
    const { combined } = measurands.at(-1)!;
    expect(combined!.value).toBeCloseTo(1 / 3, 4);
    expect(combined!.sd).toBeCloseTo((1 / 2.4 - 1 / 3.6) / 2, 4);
  });

  test("of limits alone is drawn from reference x likelihood", () => {
    const { measurands, verdicts } = standingsFrom(
      campaign({
        scales: { a: "l", b: "l" },
        derived: [ratio({ expression: "a + b", reference: uniform(-3000, 3000) })],
        predictions: [
          { measurand: "r", tolerance: { family: "interval", lower: -1000, upper: 1 } },
        ],
        measurements: [
          { measurand: "a", limit: "upper", value: 2, confidence: 0.95 },
          { measurand: "b", value: 1, sd: 0.001 },
        ],
      }),
    );
    // a = N(0, 2 / 1.6449) within far bounds, so that a + b is symmetric about 1.
    expect(measurands.at(-1)!.combined!.value).toBeCloseTo(1, 3);
    expect(measurands.at(-1)!.combined!.sd).toBeCloseTo(2 / 1.6448536, 3);
    expect(verdicts[0]!.conformance).toBeCloseTo(0.5, 3);
  });

  test("waits for all of its inputs; one that was closed leaves it unmeasured for good", () => {
    const prediction = { measurand: "r", expected: 2 };
    const waiting = campaign({
      scales: { a: "l", b: "l" },
      derived: [ratio()],
      predictions: [prediction],
      measurements: [values[0]!],
    });
    const { measurands, verdicts } = standingsFrom(waiting);
    expect(measurands.at(-1)).toMatchObject({ key: "r", combined: null });
    expect(verdicts[0]).toMatchObject({ verdict: "awaiting", value: null });
    waiting.measurands[1]!.closed = { reason: "lost", replacedBy: null };
    expect(standingsFrom(waiting).verdicts[0]!.verdict).toBe("notMeasured");
  });
});

describe("a scored derived value enters the evidence in place of its inputs", () => {
  const normal = (mean: number, sd: number) => ({ family: "normal", mean, sd });

  test("and counts as one; alone it is a measurement of its value and sd", () => {
    const document = campaign({
      scales: { a: "l", b: "l" },
      derived: [ratio({ reference: normal(3, 1) })],
      predictions: [{ measurand: "r", expected: 2.02 }],
      measurements: values,
    });
    const { hypotheses, noModel } = standingsFrom(document);
    const variance = 4 * (0.01 ** 2 + 0.02 ** 2);
    const lnNormal = (d: number, v: number) => -(d * d) / (2 * v) - Math.log(2 * Math.PI * v) / 2;
    expect(hypotheses[0]).toMatchObject({ compared: 1, silent: 0, degreesOfFreedom: 1 });
    expect(hypotheses[0]!.lnEvidence).toBeCloseTo(lnNormal(0.02, variance), 9);
    expect(hypotheses[0]!.chiSquare).toBeCloseTo(0.02 ** 2 / variance, 9);
    expect(noModel.lnEvidence).toBeCloseTo(lnNormal(1, 1 + variance), 9);
  });

  test("with others as one vector: two quotients of one denominator hang together", () => {
    const quotient = (key: string, name: string) => ({
      key,
      observable: "l",
      expression: `${name} / d`,
      from: { [name]: name, d: "d" },
      reference: normal(2, 5),
    });
    const document = campaign({
      scales: { a: "l", b: "l", d: "l", z: "l" },
      derived: [quotient("p", "a"), quotient("q", "b")],
      predictions: [
        { measurand: "p", expected: 2 },
        { measurand: "q", expected: 3 },
        { measurand: "z", expected: 1 },
      ],
      measurements: [
        { measurand: "a", value: 4.1, sd: 0.05 },
        { measurand: "b", value: 6.1, sd: 0.05 },
        { measurand: "d", value: 2, sd: 0.02, shared: [{ error: "e", coefficient: 1 }] },
        { measurand: "z", value: 1.3, sd: 0.2, shared: [{ error: "e", coefficient: -1 }] },
      ],
      more: { sharedErrors: [{ key: "e", sd: 0.04 }] },
    });
    const { hypotheses } = standingsFrom(document);
    // (p, q, z) from (a, b, d, z) by J, with e in d and z.
    const [p, q] = [4.1 / 2, 6.1 / 2];
    const j = [
      [0.5, 0, -p / 2, 0],
      [0, 0.5, -q / 2, 0],
      [0, 0, 0, 1],
    ];
    const own = [0.05, 0.05, 0.02, 0.2].map((sd) => sd * sd);
    const e = [0, 0, 0.04, -0.04];
    const c = j.map((one) =>
      j.map((other) => {
        let sum = 0;
        for (let k = 0; k < 4; k += 1) sum += one[k]! * own[k]! * other[k]!;
        const load = (row: number[]) => row.reduce((total, value, k) => total + value * e[k]!, 0);
        return sum + load(one) * load(other);
      }),
    );
    const r = [p - 2, q - 3, 0.3];
    const { determinant, quadratic } = solved(c, r);
    const ln = -(3 * Math.log(2 * Math.PI) + Math.log(determinant) + quadratic) / 2;
    expect(hypotheses[0]!.chiSquare).toBeCloseTo(quadratic, 8);
    expect(hypotheses[0]!.lnEvidence).toBeCloseTo(ln, 8);
    expect(hypotheses[0]).toMatchObject({ compared: 3, degreesOfFreedom: 3 });
  });

  test("but not where its inputs are predicted, unless that is declared: then it has a verdict only", () => {
    const document = campaign({
      scales: { a: "l", b: "l" },
      derived: [ratio()],
      predictions: [
        { measurand: "a", expected: 6 },
        { measurand: "r", expected: 2 },
      ],
      measurements: values,
    });
    const { hypotheses, verdicts } = standingsFrom(document);
    expect(hypotheses[0]).toMatchObject({ compared: 1, silent: 1, degreesOfFreedom: 1 });
    expect(verdicts.map(({ verdict }) => verdict)).toEqual(["pass", "pass"]);
  });
});

function solved(matrix: readonly (readonly number[])[], right: readonly number[]) {
  const work = matrix.map((row, i) => [...row, right[i]!]);
  let determinant = 1;
  for (let k = 0; k < work.length; k += 1) {
    determinant *= work[k]![k]!;
    for (let i = k + 1; i < work.length; i += 1) {
      const factor = work[i]![k]! / work[k]![k]!;
      for (let l = k; l <= work.length; l += 1) work[i]![l]! -= factor * work[k]![l]!;
    }
  }
  let quadratic = 0;
  const x: number[] = [];
  for (let i = work.length - 1; i >= 0; i -= 1) {
    let sum = work[i]![work.length]!;
    for (let k = i + 1; k < work.length; k += 1) sum -= work[i]![k]! * x[k]!;
    x[i] = sum / work[i]![i]!;
    quadratic += right[i]! * x[i]!;
  }
  return { determinant, quadratic };
}
