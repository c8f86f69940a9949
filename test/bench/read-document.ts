/**
 * How long a document with 200,000 measurements takes to read, step by step. Run from the root:
 * `npx tsx test/bench/read-document.ts`.
 */
import { parseJson } from "@weighhouse/campaign/json-text";
import { readCampaign, readCampaignPieces, readCampaignText } from "@weighhouse/campaign/read";

const COUNT = 200_000;
const ROUNDS = 5;

const text = JSON.stringify({
  format: "weighhouse-campaign/1",
  campaign: { key: "long-list", title: "A long list" },
  observables: [{ key: "level", title: "Level", unit: "m", scale: "linear" }],
  measurands: [
    {
      key: "level-spring",
      observable: "level",
      window: { from: "2031-03-01T00:00:00Z", to: "2031-06-01T00:00:00Z" },
      reference: { family: "uniform", lower: 0, upper: 10 },
    },
  ],
  sharedErrors: [{ key: "zero", sd: 0.02, per: "batch" }],
  facilities: [{ key: "north", title: "North" }],
  hypotheses: [
    { key: "steady", title: "Steady", predictions: [{ measurand: "level-spring", expected: 5 }] },
  ],
  measurements: Array.from({ length: COUNT }, (_, i) => ({
    id: `north:${i}`,
    measurand: "level-spring",
    facility: "north",
    batch: `night-${i % 90}`,
    observedAt: new Date(Date.UTC(2031, 2, 1) + i * 30_000).toISOString(),
    value: 5 + (i % 1000) / 1000,
    sd: 0.1,
    unit: "m",
    shared: [{ error: "zero", coefficient: 1 }],
  })),
});

function time<T>(label: string, run: () => T): T {
  const times: number[] = [];
  let result = run();
  for (let round = 0; round < ROUNDS; round++) {
    const start = performance.now();
    result = run();
    times.push(performance.now() - start);
  }
  times.sort((a, b) => a - b);
  console.log(`${label.padEnd(44)} ${times[ROUNDS >> 1]!.toFixed(0).padStart(6)} ms`);
  return result;
}

console.log(`${COUNT} measurements, ${(text.length / 1e6).toFixed(1)} MB, median of ${ROUNDS}`);
const value = time("JSON.parse", () => JSON.parse(text) as unknown);
time("parseJson (with members that stand twice)", () => parseJson(text));
const read = time("readCampaign, of what JSON.parse gave", () => readCampaign(value));
if (!read.ok) throw new Error(JSON.stringify(read.problems.slice(0, 3)));
time("readCampaignText, of the text", () => readCampaignText(text));
const PIECE = 2 ** 19;
const pieces = Array.from({ length: Math.ceil(text.length / PIECE) }, (_, i) =>
  text.slice(i * PIECE, (i + 1) * PIECE),
);
time("readCampaignPieces, of the same in pieces", () => readCampaignPieces(pieces));
