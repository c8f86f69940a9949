import { expect, test } from "vitest";
import { layOutBand } from "./band-layout";

const base = {
  scale: "linear" as const,
  reference: { lower: -1, upper: 4 },
  expected: 1.5,
  band: { lower: 1, upper: 2 },
  passes: { lower: 1.2, upper: 1.8 },
};

test("reference, band and expected value keep their order and proportion", () => {
  const layout = layOutBand(base);
  expect(layout.band.width / layout.reference.width).toBeCloseTo(1 / 5, 12);
  expect(layout.expected).toBeCloseTo(50, 12);
  expect(layout.passes?.left).toBeGreaterThan(layout.band.left);
});

test("a band beyond the reference widens the drawing and stays inside it", () => {
  const layout = layOutBand({ ...base, expected: 9, band: { lower: 8, upper: 10 } });
  expect(layout.band.left + layout.band.width).toBeLessThanOrEqual(100);
  expect(layout.reference.left).toBeGreaterThan(0);
  expect(layout.band.left).toBeGreaterThan(layout.reference.left + layout.reference.width);
});

test("an exact prediction has a band without width", () => {
  expect(layOutBand({ ...base, band: { lower: 1.5, upper: 1.5 } }).band.width).toBe(0);
});

test("on a log10 scale equal factors are equal lengths", () => {
  const layout = layOutBand({
    scale: "log10",
    reference: { lower: 1, upper: 1000 },
    expected: 10,
    band: { lower: 1, upper: 100 },
    passes: null,
  });
  expect(layout.band.width / layout.reference.width).toBeCloseTo(2 / 3, 12);
  expect(layout.passes).toBeNull();
});
