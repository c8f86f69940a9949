import { campaignDocumentSchema } from "@weighhouse/campaign/document";
import { expect, test } from "vitest";
import { measurandPlot } from "./plot-data";

const read = (scale: "linear" | "log10", measurements: object[]) => {
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
