import { logSumExp } from "@weighhouse/numerics/log-sum-exp";
import { expect, test } from "vitest";
import { boundedCoordinate, normalCoordinate } from "./coordinates";
import { integrate, type Work } from "./integrate";

// A unit normal's prior against a box of width 2, so that the integral is 1 over the plane.
const plane = ([z]: Float64Array) => -(z! * z!) / 2 - Math.log(2 * Math.PI) / 2 - Math.log(2);
const coordinates = [normalCoordinate(), boundedCoordinate({ lower: -1, upper: 1 })];
const starts = [Float64Array.of(0.3, 0.2)];

/** A density whose every look is a unit of work. */
function counted(ln: (c: Float64Array) => number) {
  let looks = 0;
  const density = (c: Float64Array) => {
    looks += 1;
    return ln(c);
  };
  const work = (rule: number, sampling: number): Work => ({ done: () => looks, rule, sampling });
  return { density, work, looks: () => looks };
}

test("where a rule has had its work the integral is sampled, within three stated errors", () => {
  const { density, work } = counted(plane);
  const found = integrate(density, coordinates, { starts, seed: 4, work: work(50, 1e6) });
  expect(found.error).toBeGreaterThan(1e-4);
  expect(Math.abs(found.ln)).toBeLessThan(3 * found.error);
  expect(found.cdf).toBeNull();
  expect(found.points.every((point) => point.length === 2)).toBe(true);
});

test("else it is done by the rule, with its distribution function", () => {
  const found = integrate(plane, coordinates, { starts, seed: 4 });
  expect(Math.abs(found.ln)).toBeLessThan(1e-6);
  // Phi(1), Abramowitz & Stegun table 26.1.
  expect(Math.abs(found.cdf!(0, 1) - 0.8413447460685429)).toBeLessThan(1e-6);
  expect(Math.abs(found.cdf!(1, 0.5) - 0.75)).toBeLessThan(1e-6);
});

test("an error of the density itself isn't taken for spent work", () => {
  const broken = () => {
    throw new RangeError("broken");
  };
  const work = { done: () => 0, rule: 50, sampling: 50 };
  expect(() => integrate(broken, coordinates, { starts, seed: 4, work })).toThrow("broken");
});

const LN_SQRT_2PI = Math.log(2 * Math.PI) / 2;
const SD = 0.01;

/** Of five coordinates: narrow unit peaks of N(0, 1) priors, so that the integral is known. */
function peaks(centres: readonly number[]) {
  const five = Array.from({ length: 5 }, () => normalCoordinate());
  const one = (centre: number) => (c: Float64Array) => {
    let ln = -5 * (LN_SQRT_2PI + Math.log(SD));
    for (const x of c) ln -= ((x - centre) / SD) ** 2 / 2;
    return ln;
  };
  const each = centres.map(one);
  return {
    five,
    ln: (c: Float64Array) => logSumExp(each.map((peak) => peak(c))),
    start: (centre: number) => new Float64Array(5).fill(centre),
    exact: Math.log(centres.length),
  };
}

test("a peak of 10^-10 of the prior takes a few thousand looks where climbs lead to it alone", () => {
  const { five, ln, start, exact } = peaks([0.5]);
  const { density, looks } = counted(ln);
  const at = [0.45, 0.48, 0.5, 0.53].map(start);
  const found = integrate(density, five, { starts: at, seed: 8 });
  expect(Math.abs(found.ln - exact)).toBeLessThan(3 * found.error);
  expect(found.error).toBeLessThan(0.03);
  expect(looks()).toBeLessThan(20_000);
});

test("peaks are sampled about together where climbs lead to each of them again", () => {
  const { five, ln, start, exact } = peaks([-2, 0.5, 1]);
  const { density, looks } = counted(ln);
  const at = [-2.02, -1.98, 0.48, 0.53, 0.98, 1.02].map(start);
  const found = integrate(density, five, { starts: at, seed: 8 });
  expect(Math.abs(found.ln - exact)).toBeLessThan(3 * found.error);
  expect(found.error).toBeLessThan(0.06);
  expect(looks()).toBeLessThan(60_000);
});

test("where every climb leads to another peak the whole prior is searched", () => {
  const ln = (c: Float64Array) =>
    20 * Math.cos(40 * c[0]!) - 200 * (c[1]! ** 2 + c[2]! ** 2 + c[3]! ** 2);
  const four = [0, 1, 2, 3].map(() => boundedCoordinate({ lower: -4, upper: 4 }));
  const at = [0, 1, 2].map((n) => Float64Array.of((n * Math.PI) / 20, 0, 0, 0));
  const found = integrate(ln, four, { starts: at, seed: 8 });
  // The cosine by the trapezoidal rule, which is exact to all digits for whole periods and as many
  // more points; here by many.
  let cosine = 0;
  const N = 200_000;
  for (let n = 0; n < N; n += 1)
    cosine += Math.exp(20 * Math.cos(40 * (-4 + (8 * (n + 0.5)) / N))) / N;
  const exact = Math.log(8 * cosine) + 1.5 * Math.log(Math.PI / 200);
  expect(found.error).toBeLessThan(0.11);
  expect(Math.abs(found.ln - exact)).toBeLessThan(3 * found.error);
});

test("where the work is spent before the end the error says so, and points are there", () => {
  const { five, ln, exact } = peaks([0.5]);
  const { density, work, looks } = counted(ln);
  const found = integrate(density, five, {
    starts: [new Float64Array(5), new Float64Array(5).fill(0.5)],
    more: () => [new Float64Array(5).fill(3)],
    seed: 8,
    work: work(1, 2000),
  });
  expect(looks()).toBeLessThan(6000);
  expect(found.points.length).toBeGreaterThan(0);
  expect(Math.abs(found.ln - exact)).toBeLessThan(3 * found.error);
});
