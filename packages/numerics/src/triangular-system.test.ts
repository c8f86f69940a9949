import { expect, test } from "vitest";
import { addRow, createSystem, logDiagonal, setUnitPrior } from "./triangular-system";

test("two parallel unknowns keep their determinant with a ratio of uncertainties of 1e8", () => {
  // det(I + w uu') = 1 + w (u1^2 + u2^2), whatever w: the matrix determinant lemma.
  const root = 1e8;
  const system = createSystem(2);
  setUnitPrior(system, 0);
  setUnitPrior(system, 1);
  addRow(system, Float64Array.of(root * 0.7, root * 0.7, root * 3));
  const exact = Math.log(1 + 2 * (root * 0.7) ** 2) / 2;
  expect(Math.abs(logDiagonal(system, 0, 2) / exact - 1)).toBeLessThan(1e-12);
  // r^2 / (1 / w + u1^2 + u2^2), of which plain normal equations keep no digit at all.
  const chiSquare = 9 / (root ** -2 + 2 * 0.7 ** 2);
  expect(Math.abs(system.rss / chiSquare - 1)).toBeLessThan(1e-7);
});

test("the order in which rows come in doesn't matter", () => {
  const rows = Array.from({ length: 40 }, (_, i) => [Math.sin(i), Math.cos(3 * i), 1, i % 7]);
  const solve = (list: number[][]) => {
    const system = createSystem(3);
    for (const row of list) addRow(system, Float64Array.from(row));
    return [system.rss, logDiagonal(system, 0, 3)];
  };
  const [rss, log] = solve(rows);
  const [rssBack, logBack] = solve([...rows].reverse());
  expect(rssBack).toBeCloseTo(rss!, 10);
  expect(logBack).toBeCloseTo(log!, 12);
});

test("unknowns that no row touches are left open, rows between them are right", () => {
  const system = createSystem(3);
  addRow(system, Float64Array.of(0, 2, 0, 8));
  addRow(system, Float64Array.of(0, 2, 0, 10));
  expect(system.data[0]).toBe(0);
  expect(system.rss).toBeCloseTo(2, 14);
});
