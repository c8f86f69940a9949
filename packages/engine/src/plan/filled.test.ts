import { expect, test } from "vitest";
import { filled } from "./filled";

function asked(count: number, f: (x: number) => number) {
  const places: number[] = [];
  const values = filled(count, (place) => {
    places.push(place);
    return f(place / (count - 1));
  });
  let away = 0;
  for (let i = 0; i < count; i += 1) {
    const there = f(i / (count - 1));
    if (there > -30) away = Math.max(away, Math.abs(values[i]! - there));
  }
  return { asked: places.length, different: new Set(places).size, away };
}

test("a parabola is asked for a quarter of its values, and known to rounding", () => {
  const found = asked(201, (x) => -50 * (x - 0.4) ** 2);
  expect(found.asked).toBeLessThan(60);
  expect(found.different).toBe(found.asked);
  expect(found.away).toBeLessThan(1e-12);
});

test("what bends is asked for where it bends", () => {
  // The log of two normal densities beside each other, and of one cut off by a distribution function.
  const two = (x: number) =>
    Math.log(Math.exp(-300 * (x - 0.3) ** 2) + Math.exp(-200 * (x - 0.6) ** 2));
  const found = asked(301, two);
  expect(found.away).toBeLessThan(1e-3);
  expect(found.asked).toBeLessThan(200);
  const kink = asked(301, (x) => -Math.abs(x - 0.5) * 90);
  expect(kink.away).toBeLessThan(1e-12);
  expect(kink.asked).toBeLessThan(100);
});

test("few values are all asked for, also where there are none", () => {
  for (const count of [2, 3, 8, 12]) {
    expect(asked(count, (x) => Math.sin(9 * x))).toMatchObject({ asked: count, away: 0 });
  }
  expect(asked(65, () => -Infinity)).toMatchObject({ asked: 65 });
});
