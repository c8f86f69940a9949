import { describe, expect, test } from "vitest";
import { logBoxIntegral, logCoupledBoxIntegral } from "./box-integral";
import fixture from "./fixtures/coupled-boxes.json";
import equicorrelatedBoxes from "./fixtures/equicorrelated-boxes.json";
import { LN_SQRT_2PI } from "./normal";
import { addRow, createSystem, logDiagonal, setUnitPrior } from "./triangular-system";

/** |R t|^2 = t' C^-1 t for the matrix of one correlation: rows t_i - sqrt(rho) eta of sd sqrt(1 - rho). */
function equicorrelated(n: number, rho: number) {
  const withEta = createSystem(n + 1);
  setUnitPrior(withEta, 0);
  for (let i = 0; i < n; i += 1) {
    const row = new Float64Array(n + 2);
    row[0] = Math.sqrt(rho / (1 - rho));
    row[i + 1] = -1 / Math.sqrt(1 - rho);
    addRow(withEta, row);
  }
  return tail(withEta, n);
}

function tail(system: ReturnType<typeof createSystem>, n: number) {
  const small = createSystem(n);
  for (let i = 0; i < n; i += 1) {
    const from = (system.size - n + i) * (system.size + 1) + system.size - n;
    small.data.set(system.data.subarray(from, from + n + 1), i * (n + 1));
  }
  return small;
}

function probability(n: number, rho: number, lower: number, upper: number) {
  const system = equicorrelated(n, rho);
  const box = { lower: new Float64Array(n).fill(lower), upper: new Float64Array(n).fill(upper) };
  const { ln, error } = logBoxIntegral(system, box);
  return { p: Math.exp(ln - n * LN_SQRT_2PI + logDiagonal(system, 0, n)), error };
}

describe("orthant probabilities", () => {
  // Sheppard's formulas; equal correlations of 1/2 give 1 / (n + 1): Genz & Bretz (2009), 2.1.
  test("in two dimensions 1/4 + asin(rho) / 2 pi", () => {
    for (const rho of [0.01, 0.5, 0.99]) {
      const exact = 0.25 + Math.asin(rho) / (2 * Math.PI);
      expect(probability(2, rho, 0, 60).p).toBeCloseTo(exact, 10);
    }
  });

  test("in three dimensions 1/8 + 3 asin(rho) / 4 pi", () => {
    for (const rho of [0.1, 0.5, 0.9]) {
      const exact = 0.125 + (3 * Math.asin(rho)) / (4 * Math.PI);
      expect(probability(3, rho, 0, 60).p).toBeCloseTo(exact, 10);
    }
  });

  test.each([4, 6, 9])("in %d dimensions within three stated errors", (n) => {
    const { p, error } = probability(n, 0.5, 0, 60);
    expect(Math.abs(Math.log(p * (n + 1)))).toBeLessThan(3 * error);
    expect(error).toBeLessThan(1e-3);
    if (n === 4) expect(probability(n, 0.5, 0, 60)).toEqual({ p, error });
  });
});

describe("boxes coupled by one shared error", () => {
  test.each(fixture.cases)("y = $y agrees with mpmath by every route", (example) => {
    const { y, u, s, lower, upper } = example;
    const n = y.length;
    const rows = y.map((value, i) => ({ value, load: u[i]! / s[i]!, scale: 1 / s[i]! }));
    const fill = (etaFirst: boolean) => {
      const system = createSystem(n + 1);
      const [eta, first] = etaFirst ? [0, 1] : [n, 0];
      setUnitPrior(system, eta);
      rows.forEach(({ value, load, scale }, i) => {
        const row = new Float64Array(n + 2);
        row[eta] = load;
        row[first + i] = scale;
        row[n + 1] = value * scale;
        addRow(system, row);
      });
      return system;
    };
    const box = { lower: Float64Array.from(lower), upper: Float64Array.from(upper) };
    const noise = s.reduce((sum, sd) => sum + LN_SQRT_2PI + Math.log(sd), 0);
    const expected = Number(example.ln);

    const coupled = logCoupledBoxIntegral(fill(false), box);
    expect(Math.abs(coupled.ln - noise - LN_SQRT_2PI - expected)).toBeLessThan(1e-9);

    const system = fill(true);
    const direct = logBoxIntegral(tail(system, n), box);
    const ln = direct.ln - noise - logDiagonal(system, 0, 1) - system.rss / 2;
    const allowed = n > 3 ? 3 * direct.error : 1e-9;
    expect(Math.abs(ln - expected)).toBeLessThan(allowed);
  });
});

// fixtures/equicorrelated-boxes.json: mpmath, one-dimensional quadrature over the common factor.
describe("boxes of equally correlated normals", () => {
  const cases = equicorrelatedBoxes.cases.map((one) => ({ ...one, n: one.lower.length }));

  test.each(cases)("$name, correlation $rho", ({ n, rho, lower, upper, ln }) => {
    const system = equicorrelated(n, rho);
    const box = {
      lower: Float64Array.from(lower, (x) => x ?? -Infinity),
      upper: Float64Array.from(upper, (x) => x ?? Infinity),
    };
    const integral = logBoxIntegral(system, box);
    const found = integral.ln - n * LN_SQRT_2PI + logDiagonal(system, 0, n);
    // Boxes up to three 1e-6; more within three stated errors (and rounding), these at most 1e-3.
    const allowed = n <= 3 ? 1e-6 : 3 * integral.error + 1e-14 * Math.abs(found);
    expect(Math.abs(found - Number(ln))).toBeLessThan(allowed);
    expect(integral.error).toBeLessThan(1e-3);
  });

  test("the order in which unknowns are given doesn't matter", () => {
    const bounds = [0.4, -1, 1, 0.2, -0.3];
    const of = (values: number[]) => {
      const upper = Float64Array.from(values);
      return logBoxIntegral(equicorrelated(5, 0.95), { lower: upper.map(() => -Infinity), upper });
    };
    const [one, other] = [of(bounds), of(bounds.toReversed())];
    expect(Math.abs(one.ln - other.ln)).toBeLessThan(3 * (one.error + other.error));
  });
});
