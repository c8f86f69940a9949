import { expect, test } from "vitest";
import { documentFrom, standingsFrom } from "./testing/documents";

const at = [0, 1, 2.5, 4];
const values = [1.563, 1.758, 1.696, 1.243];

function tableAt(a: number): number {
  const cell = Math.max(
    at.findLastIndex((x) => x <= a && x < 4),
    0,
  );
  const part = (a - at[cell]!) / (at[cell + 1]! - at[cell]!);
  return values[cell]! + part * (values[cell + 1]! - values[cell]!);
}

// Data far from what the prior expects: the least chi-square lies beyond the table's next knot,
// four to five standard deviations of the prior away.
test.each([
  [0.9, 0.1],
  [1.3, 0.08],
  [0.5, 0.12],
  [1.2, 0.05],
])("the least chi-square of %f +- %f is found beyond a knot, far out in the prior", (value, sd) => {
  const standings = standingsFrom(
    documentFrom({
      observables: [{ key: "level", title: "Level", unit: "m", scale: "linear" }],
      measurands: [
        { key: "may", observable: "level", reference: { family: "normal", mean: 0, sd: 5 } },
      ],
      hypotheses: [
        {
          key: "tabled",
          title: "Tabled",
          parameters: [{ key: "a", prior: { family: "normal", mean: 2, sd: 0.25 } }],
          tables: [{ key: "grid", in: ["x"], at: [at], values }],
          predictions: [{ measurand: "may", expected: "table(grid, a)" }],
        },
      ],
      measurements: [{ id: "m", measurand: "may", value, sd }],
    }),
  );
  let least = Infinity;
  for (let i = 0; i <= 400_000; i += 1) {
    const a = i / 100_000;
    const chiSquare = ((value - tableAt(a)) / sd) ** 2 + ((a - 2) / 0.25) ** 2;
    least = Math.min(least, chiSquare);
  }
  // The grid's own steps of 1e-5 leave chi-square's minimum 1e-7 too high at most.
  expect(standings.hypotheses[0]!.chiSquare).toBeLessThanOrEqual(least + 1e-9);
  expect(standings.hypotheses[0]!.chiSquare).toBeGreaterThan(least - 1e-6);
});
