import type { CampaignDocument, Measurement, Reference } from "@weighhouse/campaign/document";
import { expect, test } from "vitest";
import {
  formatReading,
  quantitiesOf,
  referenceMiddle,
  referenceWords,
  supposedSd,
  type Quantity,
} from "./quantity";

function campaign(
  scale: "linear" | "log10",
  reference: Partial<Reference>,
  measurements: Partial<Measurement>[] = [],
): { document: CampaignDocument; quantity: Quantity } {
  const document = {
    observables: [{ key: "flow", unit: "kg/s", scale }],
    measurands: [{ key: "flow-may", observable: "flow", reference: { scatter: 0, ...reference } }],
    measurements: measurements.map((each) => ({
      measurand: "flow-may",
      setAside: null,
      unit: null,
      sdDex: null,
      ...each,
    })),
  } as unknown as CampaignDocument;
  const quantity = quantitiesOf(document).get("flow-may");
  if (quantity === undefined) throw new Error("no such quantity");
  return { document, quantity };
}

test("with nothing posted, the supposed uncertainty is a fiftieth of a uniform range", () => {
  const linear = campaign("linear", { family: "uniform", lower: -1, upper: 4 });
  expect(supposedSd(linear.document, linear.quantity)).toBe(0.1);
  const log = campaign("log10", { family: "uniform", lower: 1, upper: 1e5 });
  expect(supposedSd(log.document, log.quantity)).toBe(0.1);
});

test("what was posted says how well it can be measured; set aside and foreign units do not", () => {
  const { document, quantity } = campaign("linear", { family: "normal", mean: 1, sd: 5 }, [
    { value: 2, sd: 0.3 },
    { value: 2, sd: 0.2 },
    { value: 2, sd: 0.4 },
    { value: 2, sd: 99, setAside: { reason: "clouds" } },
    { value: 2, sd: 99, unit: "g/s" },
  ]);
  expect(supposedSd(document, quantity)).toBe(0.3);
});

test("on a log10 scale the supposed uncertainty is in dex", () => {
  const { document, quantity } = campaign("log10", { family: "uniform", lower: 1, upper: 10 }, [
    { value: 10, sd: 10 * Math.LN10 * 0.05 },
  ]);
  expect(supposedSd(document, quantity)).toBeCloseTo(0.05, 12);
});

test("the no-model range is said in words, its middle taken on its own scale", () => {
  const linear = campaign("linear", { family: "uniform", lower: -1, upper: 4 });
  expect(referenceWords(linear.quantity)).toBe("−1 to 4 kg/s, all values alike");
  expect(referenceMiddle(linear.quantity)).toBe(1.5);
  const log = campaign("log10", { family: "uniform", lower: 1, upper: 100 });
  expect(referenceWords(log.quantity)).toBe("1 to 100 kg/s, all factors alike");
  expect(referenceMiddle(log.quantity)).toBe(10);
  const normal = campaign("log10", { family: "normal", mean: 15, sd: 0.5 });
  expect(referenceWords(normal.quantity)).toContain("0.5 dex");
});

test("a reading is shown to what its uncertainty leaves certain", () => {
  const linear = campaign("linear", { family: "uniform", lower: -1, upper: 4 });
  expect(formatReading(-0.191_936, 0.1, linear.quantity)).toBe("−0.19");
  expect(formatReading(1.5, null, linear.quantity)).toBe("1.5");
  const log = campaign("log10", { family: "uniform", lower: 1, upper: 1000 });
  expect(formatReading(123.456, 0.1, log.quantity)).toBe("123");
});
