import { describe, expect, test } from "vitest";
import { binomialUpperTail } from "@weighhouse/numerics/binomial";
import { chiSquareUpperTail } from "@weighhouse/numerics/chi-square";
import { gammaQuantile } from "@weighhouse/numerics/gamma-distribution";
import {
  logNormalCdf,
  normalCdf,
  normalQuantile,
  normalUpperQuantile,
} from "@weighhouse/numerics/normal";
import {
  logPoissonPmf,
  poissonCdf,
  poissonUpperTail,
} from "@weighhouse/numerics/poisson-distribution";
import { record, relative } from "./records";

// 1e-12 relative down to 1e-300: the accuracy that distribution functions are held to.
const ACCURACY = 1e-12;

describe("chi-square tails", () => {
  test("are those of the grid, recomputed with mpmath (chi2.tail_grid)", () => {
    const { expected } =
      record<{ x: number; dof: number; ln_sf: number; sf: number | null }[]>("chi2.tail_grid");
    let checked = 0;
    for (const { x, dof, ln_sf, sf } of expected) {
      if (sf === null || sf < 1e-300) continue;
      const found = chiSquareUpperTail(x, dof);
      expect(relative(found, sf), `x = ${x}, dof = ${dof}`).toBeLessThan(ACCURACY);
      expect(Math.abs(Math.log(found) - ln_sf)).toBeLessThan(1e-10);
      checked += 1;
    }
    expect(checked).toBeGreaterThan(60);
  });

  test.each([1, 2, 3, 5, 10, 20, 30, 50, 100])("at the quantiles for dof %d are theirs", (dof) => {
    const { inputs, expected } = record<number[], { q: number[] }>(`chi2.isf.${dof}`);
    expected.forEach((x, i) => {
      // A quantile's last digit moves the tail by up to x / 2 times as much.
      const allowed = ACCURACY + x * 2e-16;
      expect(relative(chiSquareUpperTail(x, dof), inputs.q[i]!)).toBeLessThan(allowed);
    });
  });

  test("bracket every printed entry of the NIST handbook's table (chi2.nist_upper_table)", () => {
    const { inputs } = record<
      unknown,
      { rows: { [dof: string]: number[] }; columns_upper_tail_prob: number[] }
    >("chi2.nist_upper_table");
    for (const [dof, row] of Object.entries(inputs.rows)) {
      row.forEach((printed, i) => {
        // Printed to three decimals; two entries are off by a little more than half a unit.
        const p = inputs.columns_upper_tail_prob[i]!;
        expect(chiSquareUpperTail(printed - 0.00052, Number(dof))).toBeGreaterThan(p);
        expect(chiSquareUpperTail(printed + 0.00052, Number(dof))).toBeLessThan(p);
      });
    }
    expect(Object.keys(inputs.rows)).toHaveLength(38);
  });

  test("agree with Abramowitz & Stegun's table 26.8 to its six digits (chi2.AS26_8)", () => {
    const { expected } = record<{ dof: number; Q: number; mpmath: number }[]>("chi2.AS26_8");
    for (const { dof, Q, mpmath } of expected) {
      expect(relative(chiSquareUpperTail(mpmath, dof), Q)).toBeLessThan(ACCURACY);
    }
  });
});

describe("normal tails", () => {
  test("are mpmath's (normal.tail)", () => {
    const { expected } = record<{ z: number; sf: number }[]>("normal.tail");
    for (const { z, sf } of expected) {
      expect(relative(normalCdf(-z), sf), `z = ${z}`).toBeLessThan(1e-13);
    }
  });

  test("have the logs of mpmath's, to 40 sigma (normal.log_cdf)", () => {
    const { expected } = record<{ z: number; ln_cdf: number }[]>("normal.log_cdf");
    for (const { z, ln_cdf } of expected) {
      expect(relative(logNormalCdf(z), ln_cdf), `z = ${z}`).toBeLessThan(1e-13);
    }
  });

  test("are the sigma table's, one-sided (normal.nsigma)", () => {
    const { expected } = record<{ n_sigma: number; p_one_sided: number }[]>("normal.nsigma");
    for (const { n_sigma, p_one_sided } of expected) {
      expect(relative(normalCdf(-n_sigma), p_one_sided)).toBeLessThan(ACCURACY);
    }
  });
});

describe("Poisson limits and tails", () => {
  interface PoissonLimit {
    n: number;
    up90: number;
    up95: number;
    lo90: number;
    lo95: number;
    printed_up: [number, number];
    printed_lo: [number, number] | null;
  }
  const { expected } = record<PoissonLimit[]>("limit.poisson_zero_background");

  test("the PDG's one-sided limits are gamma quantiles (limit.poisson_zero_background)", () => {
    for (const { n, up90, up95, lo90, lo95, printed_up, printed_lo } of expected) {
      const above = { shape: n + 1, scale: 1 };
      expect(relative(gammaQuantile(0.9, above), up90)).toBeLessThan(ACCURACY);
      expect(relative(gammaQuantile(0.95, above), up95)).toBeLessThan(ACCURACY);
      // Printed to two decimals, 3.0 and 6.3 among them.
      expect(Math.abs(gammaQuantile(0.9, above) - printed_up[0])).toBeLessThan(0.00501);
      expect(Math.abs(gammaQuantile(0.95, above) - printed_up[1])).toBeLessThan(0.00501);
      if (n === 0) continue;
      const below = { shape: n, scale: 1 };
      expect(relative(gammaQuantile(0.1, below), lo90)).toBeLessThan(ACCURACY);
      expect(relative(gammaQuantile(0.05, below), lo95)).toBeLessThan(ACCURACY);
      expect(relative(gammaQuantile(0.1, below), printed_lo![0])).toBeLessThan(0.01);
    }
    expect(expected).toHaveLength(11);
  });

  test("at the limits the tails are what the limits leave (limit.poisson_zero_background)", () => {
    for (const { n, up90, up95, lo90, lo95 } of expected) {
      // A mean's last digit moves the tail by at most n + 2 times as much.
      expect(relative(poissonCdf(n, up90), 0.1)).toBeLessThan(ACCURACY);
      expect(relative(poissonCdf(n, up95), 0.05)).toBeLessThan(ACCURACY);
      if (n === 0) continue;
      expect(relative(poissonUpperTail(n, lo90), 0.1)).toBeLessThan(ACCURACY);
      expect(relative(poissonUpperTail(n, lo95), 0.05)).toBeLessThan(ACCURACY);
    }
  });

  test("ln L is 1/2 down at Barlow's errors of a count (asym.poisson_delta_lnL)", () => {
    const rows = record<{ n: number; plus: number; minus: number }[]>("asym.poisson_delta_lnL");
    for (const { n, plus, minus } of rows.expected) {
      for (const mean of [n + plus, n - minus]) {
        const drop = logPoissonPmf(n, n) - logPoissonPmf(n, mean);
        expect(Math.abs(drop - 0.5)).toBeLessThan(1e-14 * Math.max(1, n));
      }
    }
  });
});

test("115 of 200 has the binomial tail of the textbook example (bf.binomial_115_200)", () => {
  const { expected } = record<{ p_one_sided_ge_115: number }>("bf.binomial_115_200");
  expect(relative(binomialUpperTail(115, 200, 0.5), expected.p_one_sided_ge_115)).toBeLessThan(
    ACCURACY,
  );
});

describe("normal quantiles", () => {
  test("undo the tails (normal.tail)", () => {
    const { expected } = record<{ z: number; sf: number }[]>("normal.tail");
    for (const { z, sf } of expected) {
      // Where Q is steep in z, a last digit of Q is worth eps / z; near 0 eps / phi(z).
      const allowed = 1e-14 * Math.max(1, z);
      expect(Math.abs(normalUpperQuantile(sf) - z), `z = ${z}`).toBeLessThan(allowed);
      expect(Math.abs(normalQuantile(sf) + z), `z = ${z}`).toBeLessThan(allowed);
    }
  });
});
