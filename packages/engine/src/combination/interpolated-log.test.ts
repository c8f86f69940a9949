import { describe, expect, test } from "vitest";
import { fainterFactor } from "../block/factors";
import { interpolatedLog } from "./interpolated-log";

describe("a costly logarithm looked at in pieces", () => {
  // A limit in magnitudes seen through scatter: a wall on one side, flat on the other.
  const factor = fainterFactor({ limit: 19.4, sigmas: 5, extra: 0.09 });

  test("is what it stands for wherever that counts", () => {
    let asked = 0;
    const ln = (mu: number) => {
      asked += 1;
      return factor.ln(mu);
    };
    const quick = interpolatedLog(ln, factor);
    for (let mu = 19; mu < 40; mu += 0.01) {
      const exact = factor.ln(mu);
      if (exact > -16) expect(Math.abs(quick(mu) - exact)).toBeLessThan(1e-8);
    }
    expect(asked).toBeLessThan(400);
  });

  test("in whatever order it is asked, far away first", () => {
    const quick = interpolatedLog((mu) => factor.ln(mu), factor);
    expect(quick(0)).toBeLessThan(-1000);
    expect(quick(22)).toBeCloseTo(factor.ln(22), 8);
  });

  test("is -Infinity where the logarithm is, or is no number", () => {
    const quick = interpolatedLog((x) => (x < 0 ? Number.NaN : -x), { centre: 1, scale: 1 });
    expect(quick(-1000)).toBe(-Infinity);
    expect(quick(1.5)).toBeCloseTo(-1.5, 8);
  });
});
