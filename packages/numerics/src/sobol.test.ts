import { expect, test } from "vitest";
import fixture from "./fixtures/sobol-points.json";
import { NumericsError } from "./numerics-error";
import { sobolPoints } from "./sobol";

test.each(fixture.cases)(
  "$dimension-dimensional Sobol points from $skip on are scipy's, exactly",
  ({ dimension, skip, points }) => {
    expect([...sobolPoints(dimension, points.length, skip)]).toEqual(points.flat());
  },
);

test("among the first 2^k points each coordinate takes every multiple of 2^-k once", () => {
  const points = sobolPoints(64, 1024);
  for (let j = 0; j < 64; j += 1) {
    const seen = Array.from({ length: 1024 }, (_, i) => points[i * 64 + j]! * 1024);
    expect(new Set(seen).size).toBe(1024);
    expect(seen.every(Number.isInteger)).toBe(true);
  }
});

test("a start in the middle gives the same points as counting up to it", () => {
  const all = sobolPoints(7, 300);
  expect([...sobolPoints(7, 100, 200)]).toEqual([...all.subarray(1400)]);
});

test("what lies outside the table is refused", () => {
  expect(() => sobolPoints(65, 1)).toThrow(NumericsError);
  expect(() => sobolPoints(0, 1)).toThrow(NumericsError);
  expect(() => sobolPoints(2, 2, 2 ** 32 - 1)).toThrow(NumericsError);
  expect(() => sobolPoints(2, -1)).toThrow(NumericsError);
});
