import { expect, test } from "vitest";
import { documentTitles } from "./document-titles";

test("parts are known by their titles, and nothing of a document that can't be read", () => {
  const document = {
    format: "weighhouse-campaign/1",
    campaign: { key: "c", title: "C" },
    observables: [{ key: "o", title: "O", unit: "m", scale: "linear" }],
    measurands: [
      {
        key: "m",
        title: "Height",
        observable: "o",
        reference: { family: "uniform", lower: 0, upper: 1 },
      },
    ],
    hypotheses: [{ key: "h", title: "Tide", predictions: [] }],
  };
  const titles = documentTitles(JSON.stringify(document));
  expect([...titles.hypotheses, ...titles.measurands]).toEqual([
    ["h", "Tide"],
    ["m", "Height"],
  ]);
  expect(documentTitles("{").hypotheses.size).toBe(0);
});
