import { campaignDocumentSchema } from "@weighhouse/campaign/document";
import { expect, test } from "vitest";
import { measurandPlot } from "./plot-data";
import { predictedCurves } from "./predicted-curves";

const read = (scale: "linear" | "log10" | "count", measurements: object[]) => {
  const document = campaignDocumentSchema.parse({
    format: "weighhouse-campaign/1",
    campaign: { key: "c", title: "C" },
    observables: [{ key: "o", title: "O", unit: "m", scale }],
    measurands: [
      { key: "m", observable: "o", reference: { family: "uniform", lower: 0.01, upper: 1000 } },
    ],
    measurements,
  });
  const [measurand, observable] = [document.measurands[0], document.observables[0]];
  if (!measurand || !observable) throw new Error("the document lost its parts");
  return { measurand, observable, measurements: document.measurements, bands: [], combined: null };
};

test("with every time known the points stand at their times, else in the order of posting", () => {
  const at = "2031-03-01T00:00:00Z";
  const first = { id: "a", measurand: "m", value: 2, sd: 1, observedAt: at };
  const second = { id: "b", measurand: "m", value: 3, sd: 1 };
  expect(measurandPlot(read("linear", [first])).points.map((point) => point.x)).toEqual([
    Date.parse(at),
  ]);
  expect(measurandPlot(read("linear", [first, second])).points.map((point) => point.x)).toEqual([
    1, 2,
  ]);
});

test("an error bar that would reach zero on a logarithmic axis stops a decade down", () => {
  const plot = measurandPlot(read("log10", [{ id: "a", measurand: "m", value: 2, sd: 3 }]));
  expect(plot.points[0]).toMatchObject({ low: 0.2, high: 5, error: [1.8, 3] });
  expect(plot.y[0]).toBeGreaterThan(0);
});

test("the range is that of data and predictions; the reference fills it only where there are none", () => {
  const empty = measurandPlot(read("linear", []));
  expect(empty.y[0]).toBeLessThan(0.01);
  expect(empty.y[1]).toBeGreaterThan(1000);
  const one = measurandPlot(read("linear", [{ id: "a", measurand: "m", value: 10, sd: 1 }]));
  expect(one.y).toEqual([9 - 0.16, 11 + 0.16]);
});

test("a measurement without a value is not drawn", () => {
  const plot = measurandPlot(
    read("linear", [{ id: "a", measurand: "m", setAside: { reason: "lost" } }]),
  );
  expect(plot.points).toEqual([]);
});

test("a count is drawn as the rate that it gives, with the root of the count (common practice)", () => {
  const count = { id: "a", measurand: "m", count: 25, exposure: 2, background: 5 };
  const [point] = measurandPlot(read("count", [count])).points;
  expect(point).toMatchObject({ value: 10, low: 7.5, high: 12.5 });
});

test("a curve stands along the condition of its reference, where all measurements have it", () => {
  const document = campaignDocumentSchema.parse({
    format: "weighhouse-campaign/1",
    campaign: { key: "c", title: "C" },
    observables: [
      {
        key: "o",
        title: "O",
        unit: "K",
        scale: "linear",
        conditions: [
          { key: "wind", unit: "m/s" },
          { key: "depth", unit: "m" },
        ],
      },
    ],
    measurands: [
      {
        key: "m",
        observable: "o",
        shape: "curve",
        where: { depth: [0, 40] },
        reference: { family: "polynomial", in: "depth", degree: 1, centre: 0, sd: 1 },
      },
    ],
    hypotheses: [
      {
        key: "h",
        title: "H",
        predictions: [
          { measurand: "m", expected: "2 * depth", tolerance: { family: "normal", sd: 1 } },
        ],
      },
    ],
    measurements: [
      { id: "a", measurand: "m", value: 2, sd: 1, conditions: { depth: 12 } },
      { id: "b", measurand: "m", value: 3, sd: 1, conditions: { depth: 30 } },
    ],
  });
  const [measurand, observable] = [document.measurands[0]!, document.observables[0]!];
  const plot = measurandPlot({
    measurand,
    observable,
    measurements: document.measurements,
    bands: [],
    combined: null,
  });
  expect(plot.along).toMatchObject({ by: "condition", key: "depth" });
  expect(plot.points.map(({ x }) => x)).toEqual([12, 30]);
  const place = { document, standings: null, measurand, condition: "depth", from: 0, to: 60 };
  const [curve] = predictedCurves(place);
  expect(curve!.points.at(-1)).toEqual({ x: 60, value: 120 });
});
