import { describe, expect, test } from "vitest";
import { chiSquareUpperTail } from "@weighhouse/numerics/chi-square";
import { logNormalCdf, normalCdf } from "@weighhouse/numerics/normal";
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
