import { gaussKronrod } from "@weighhouse/numerics/gauss-kronrod";
import { describe, expect, test } from "vitest";
import { asymmetricFactor } from "./asymmetric";
import { convolved } from "./convolution";
import { fainterFactor, linearNoiseFactor } from "./factors";
import { ASYMMETRIC, type BlockRows, type Factor } from "./problem";

const rows = (plus: number, minus: number): BlockRows => ({
  count: 1,
  observed: Float64Array.of(0),
  kind: Uint8Array.of(ASYMMETRIC),
  variance: Float64Array.of(0),
  asymmetric: { plus: Float64Array.of(plus), minus: Float64Array.of(minus) },
  eachFlat: null,
  factors: null,
  period: null,
  groups: [],
  smooth: [],
});

const plain: [string, Factor][] = [
  ["a clear flux", linearNoiseFactor({ value: 30, sd: 1, extra: 0, centre: 0 })],
  ["a very clear flux", linearNoiseFactor({ value: 3000, sd: 1, extra: 0, centre: 0 })],
  ["a flux at four sigma", linearNoiseFactor({ value: 4, sd: 1, extra: 0, centre: 0 })],
  ["a flux of nothing", linearNoiseFactor({ value: 0, sd: 1, extra: 0, centre: 0 })],
  ["a flux below zero", linearNoiseFactor({ value: -3, sd: 1, extra: 0, centre: 0 })],
  ["a magnitude not reached", fainterFactor({ limit: 0, sigmas: 5, extra: 0 })],
  ["a lopsided reading", asymmetricFactor(rows(0.9, 0.1), 0)],
  ["a nearly even reading", asymmetricFactor(rows(0.3, 0.4), 0)],
];

// The same integral by adaptive quadrature on three hundred equal pieces.
function slowly(factor: Factor, sd: number, mu: number): number {
  const g = (s: number) => factor.ln(mu + sd * s) - (s * s) / 2;
  const far = Math.abs(factor.centre - mu) / sd + 9;
  let height = -Infinity;
  for (let k = -3000; k <= 3000; k += 1) height = Math.max(height, g((far * k) / 3000));
  let sum = 0;
  const places = factor.breaks.map((at) => (at - mu) / sd);
  for (let k = -150; k <= 150; k += 1) places.push((far * k) / 150);
  places.sort((a, b) => a - b);
  for (let k = 1; k < places.length; k += 1) {
    const f = (s: number) => Math.exp(g(s) - height);
    sum += gaussKronrod(f, places[k - 1]!, places[k]!, { relative: 1e-12 }).value;
  }
  return height + Math.log(sum) - Math.log(2 * Math.PI) / 2;
}

describe.each(plain)("%s through a normal of its own", (_name, factor) => {
  test.each([0.01, 0.1, 0.5, 3])("of sd %d, before and after it is tabulated", (sd) => {
    const seen = convolved(factor, sd * sd);
    for (const shift of [-4, -1, -0.2, 0, 0.3, 1.5]) {
      const mu = factor.centre + shift;
      const expected = slowly(factor, sd, mu);
      for (let times = 0; times < 20; times += 1) {
        const found = seen.ln(mu);
        expect(Math.abs(found - expected)).toBeLessThan(1e-10 * Math.max(1, Math.abs(expected)));
      }
    }
  });
});
