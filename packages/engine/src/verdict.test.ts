import { describe, expect, test } from "vitest";
import { documentFrom, standingsFrom } from "./testing/documents";

type Part = Record<string, unknown>;

function rowOf(prediction: Part, values: number[], { sd = 0.1, rule = {}, status = "final" } = {}) {
  const { verdicts, hypotheses } = standingsFrom(
    documentFrom({
      campaign: { key: "k", title: "K", rule },
      observables: [{ key: "o", title: "O", unit: "m", scale: "linear" }],
      measurands: [
        { key: "x", observable: "o", reference: { family: "uniform", lower: -50, upper: 50 } },
      ],
      hypotheses: [{ key: "h", title: "H", predictions: [{ measurand: "x", ...prediction }] }],
      measurements: values.map((value, i) => ({ id: `a${i}`, measurand: "x", value, sd, status })),
    }),
  );
  return { ...verdicts[0]!, standing: hypotheses[0]! };
}

const within = (sd: number, more: Part = {}) => ({
  expected: 0,
  tolerance: { family: "normal", sd },
  ...more,
});

describe("a prediction with a tolerance (JCGM 106 guarded acceptance and rejection)", () => {
  test("passes while the true value lies inside with probability rule.pass", () => {
    // Interval +-2; one-sided 95 % is 1.6449 u (normal table): 2 - 0.16449 = 1.8355.
    expect(rowOf(within(1), [1.83]).verdict).toBe("pass");
    expect(rowOf(within(1), [1.84]).verdict).toBe("undecided");
    expect(rowOf(within(1), [-1.83]).verdict).toBe("pass");
    expect(rowOf(within(1), [1.83], { rule: { pass: 0.99 } }).verdict).toBe("undecided");
    expect(rowOf(within(1), [1.83], { rule: { coverage: 1 } }).verdict).toBe("undecided");
  });

  test("fails only where beyond with 1 - rule.fail and its own chi-square has p < 0.01", () => {
    // Beyond: 2 + 0.16449; p < 0.01: |value| > 2.5758 sqrt(1 + 0.01) = 2.5887.
    expect(rowOf(within(1), [2.58]).verdict).toBe("undecided");
    expect(rowOf(within(1), [2.6]).verdict).toBe("fail");
    expect(rowOf(within(1), [-2.6]).verdict).toBe("fail");
    expect(rowOf(within(0.1), [0.3]).verdict).toBe("undecided");
  });

  test("too coarse a measurement decides nothing", () => {
    expect(rowOf(within(0.1), [0], { sd: 2 }).verdict).toBe("undecided");
  });

  test("disagreeing measurements widen the uncertainty by the Birge ratio", () => {
    // Two equal uncertainties: u x Birge is half their difference.
    const row = rowOf(within(1), [-1, 1]);
    expect(row).toMatchObject({ inflated: true, value: 0 });
    expect(row.sd).toBeCloseTo(1, 12);
    expect(row.conformance).toBeCloseTo(0.9544997361036416, 12);
    expect(rowOf(within(1), [-0.1, 0.1])).toMatchObject({ inflated: false, verdict: "pass" });
  });

  test("tension is the distance in the two uncertainties together", () => {
    expect(rowOf(within(1), [2], { sd: 0.75 }).tension).toBeCloseTo(2 / 1.25, 12);
    expect(rowOf({ expected: 1 }, [2], { sd: 0.5 }).tension).toBeCloseTo(2, 12);
  });

  test("one provisional measurement makes the verdict provisional", () => {
    expect(rowOf(within(1), [0]).provisional).toBe(false);
    expect(rowOf(within(1), [0], { status: "provisional" }).provisional).toBe(true);
  });
});

describe("an exact prediction, against the reference", () => {
  test("passes at p >= 0.05 and B >= sqrt 10", () => {
    // p = 0.05 at 1.96 sd (normal table).
    expect(rowOf({ expected: 0 }, [0.19]).verdict).toBe("pass");
    expect(rowOf({ expected: 0 }, [0.2]).verdict).toBe("undecided");
    // A reference as narrow as the measurement leaves nothing to gain: B < sqrt 10.
    expect(rowOf({ expected: 0 }, [0], { sd: 15 }).verdict).toBe("undecided");
    expect(rowOf({ expected: 0 }, [0]).conformance).toBeNull();
  });

  test("fails at p < 0.0027 and B <= 1 / sqrt 10, or p < 5.7e-7", () => {
    // B against a width of 100: 100 phi(z) / 0.1; 1 / sqrt 10 is reached at z = 3.779.
    expect(rowOf({ expected: 0 }, [0.31]).verdict).toBe("undecided");
    expect(rowOf({ expected: 0 }, [0.377]).verdict).toBe("undecided");
    expect(rowOf({ expected: 0 }, [0.379]).verdict).toBe("fail");
    // B isn't below 1 / sqrt 10 at 5 sigma where the measurement is finer still.
    expect(rowOf({ expected: 0 }, [0.0000049], { sd: 1e-6 }).verdict).toBe("undecided");
    expect(rowOf({ expected: 0 }, [0.0000051], { sd: 1e-6 }).verdict).toBe("fail");
  });

  test("a failed decisive prediction is listed, and evidence is untouched", () => {
    const plain = rowOf({ expected: 0 }, [1]);
    const decisive = rowOf({ expected: 0, decisive: true }, [1]);
    expect(plain.standing.failedDecisive).toEqual([]);
    expect(decisive.standing.failedDecisive).toEqual(["x"]);
    expect(decisive.standing.lnEvidence).toBe(plain.standing.lnEvidence);
    expect(rowOf({ expected: 0, decisive: true }, [0]).standing.failedDecisive).toEqual([]);
  });
});
