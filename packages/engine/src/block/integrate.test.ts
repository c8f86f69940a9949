import { expect, test } from "vitest";
import { boundedCoordinate, normalCoordinate } from "./coordinates";
import { integrate } from "./integrate";

// A unit normal's prior against a box of width 2, so that the integral is 1 over the plane.
const ln = ([z]: Float64Array) => -(z! * z!) / 2 - Math.log(2 * Math.PI) / 2 - Math.log(2);
const coordinates = [normalCoordinate(), boundedCoordinate({ lower: -1, upper: 1 })];
const starts = [Float64Array.of(0.3, 0.2)];

test("where a rule has had its calls the integral is sampled, within three stated errors", () => {
  const found = integrate(ln, coordinates, { starts, seed: 4, calls: 50 });
  expect(found.error).toBeGreaterThan(1e-4);
  expect(Math.abs(found.ln)).toBeLessThan(3 * found.error);
  expect(found.cdf).toBeNull();
  expect(found.points.every((point) => point.length === 2)).toBe(true);
});

test("else it is done by the rule, with its distribution function", () => {
  const found = integrate(ln, coordinates, { starts, seed: 4 });
  expect(Math.abs(found.ln)).toBeLessThan(1e-6);
  // Phi(1), Abramowitz & Stegun table 26.1.
  expect(Math.abs(found.cdf!(0, 1) - 0.8413447460685429)).toBeLessThan(1e-6);
  expect(Math.abs(found.cdf!(1, 0.5) - 0.75)).toBeLessThan(1e-6);
});

test("an error of the density itself isn't taken for spent calls", () => {
  const broken = () => {
    throw new RangeError("broken");
  };
  expect(() => integrate(broken, coordinates, { starts, seed: 4, calls: 50 })).toThrow("broken");
});
