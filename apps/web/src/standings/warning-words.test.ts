import { readCampaign } from "@weighhouse/campaign/read";
import type { Warning } from "@weighhouse/campaign/standings";
import { scoreCampaign } from "@weighhouse/engine/score";
import { expect, test } from "vitest";
import { warningWords } from "./warning-words";

/** Two hypotheses that differ on common ground one way and by silence the other. */
const input = {
  format: "weighhouse-campaign/1",
  campaign: { key: "c", title: "C" },
  observables: [{ key: "o", title: "O", unit: "m", scale: "linear" }],
  measurands: ["first", "first-again"].map((key) => ({
    key,
    title: `Height ${key.length}`,
    observable: "o",
    reference: { family: "uniform", lower: 0, upper: 100 },
  })),
  hypotheses: [
    {
      key: "tide",
      title: "Tide alone",
      predictions: [{ measurand: "first", expected: 11, tolerance: { family: "normal", sd: 1 } }],
    },
    {
      key: "tide-and-wind",
      title: "Tide and wind",
      predictions: ["first", "first-again"].map((measurand) => ({
        measurand,
        expected: 14,
        tolerance: { family: "normal", sd: 1 },
      })),
    },
  ],
  measurements: ["first", "first-again"].map((measurand) => ({
    id: measurand,
    measurand,
    value: measurand === "first" ? 11 : 14,
    sd: 1,
  })),
};

function scored() {
  const read = readCampaign(input);
  if (!read.ok) throw new Error(JSON.stringify(read.problems));
  const standings = scoreCampaign(read.value);
  if (!standings.ok) throw new Error(JSON.stringify(standings.problems));
  return { document: read.value, standings: standings.value };
}

test("the engine's sentence about a pair names both hypotheses by their titles", () => {
  const { document, standings } = scored();
  const warning = standings.warnings.find(({ code }) => code === "common-ground-disagrees");
  const words = warningWords(warning!, document, standings.pairs);
  expect(words.filter((word) => word.path)).toEqual(
    expect.arrayContaining([
      { text: "Tide alone", path: "hypotheses/tide" },
      { text: "Tide and wind", path: "hypotheses/tide-and-wind" },
    ]),
  );
  const sentence = words.map(({ text }) => text).join("");
  expect(sentence).toMatch(/^Tide (alone|and wind) against Tide (alone|and wind): log₁₀ Bayes/);
});

test("a key that may be a word of the sentence as well stays as it is", () => {
  const { document } = scored();
  const warning: Warning = {
    code: "poor-reference",
    at: "/measurands/0",
    text: "The first reference of first fits badly.",
  };
  expect(warningWords(warning, document, [])).toEqual([
    { text: warning.text },
    { text: " " },
    { text: "Height 5", path: "quantities/first" },
  ]);
});
