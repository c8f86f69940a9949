import { readCandidatesText } from "@weighhouse/campaign/candidates";
import { simulationSchema, type Simulation } from "@weighhouse/campaign/simulation";
import { normalCdf } from "@weighhouse/numerics/normal";
import { describe, expect, test } from "vitest";
import { documentFrom } from "../testing/documents";
import { simulate } from "./simulate";

function simulated(
  parts: Record<string, unknown>,
  { candidates, runs }: { candidates: object[]; runs: number },
): Simulation {
  const document = documentFrom({
    observables: [{ key: "level", title: "Level", unit: "m", scale: "linear" }],
    measurands: [
      { key: "may", observable: "level", reference: { family: "uniform", lower: -10, upper: 10 } },
    ],
    ...parts,
  });
  const text = JSON.stringify({ format: "weighhouse-candidates/1", candidates });
  const read = readCandidatesText(text, document);
  if (!read.ok) throw new Error(JSON.stringify(read.problems));
  const found = simulate(document, read.value, { runs });
  if (!found.ok) throw new Error(JSON.stringify(found.problems));
  expect(simulationSchema.parse(found.value)).toEqual(found.value);
  return found.value;
}

const two = (distance: number) => ({
  hypotheses: ["one", "other"].map((key, i) => ({
    key,
    title: key,
    predictions: [{ measurand: "may", expected: i * distance }],
  })),
});

describe("two exact predictions d sd apart", () => {
  // ln B = d x - d^2 / 2 for x ~ N(0 or d, 1): the true one leads with probability Phi(d / 2), and
  // misleads by log10 B > 1 with Phi(-d / 2 - ln 10 / d) (Royall, 1997: a normal's misleading evidence).
  const d = 1.5;
  const runs = 2000;
  const candidates = [{ key: "a", measurand: "may", sd: 1 }];
  const { truths } = simulated(two(d), { candidates, runs });

  test("lead, decide and mislead as often as the normal distribution says, within 4 sd", () => {
    const within = (found: number, p: number) =>
      expect(Math.abs(found - p)).toBeLessThan(4 * Math.sqrt((p * (1 - p)) / runs));
    for (const { leads, leadsDecisively, misleading } of truths) {
      within(leads, normalCdf(d / 2));
      within(leadsDecisively, normalCdf(d / 2 - Math.LN10 / d));
      within(misleading, normalCdf(-d / 2 - Math.LN10 / d));
    }
  });

  test("the spread of log10 B is that of d z + d^2 / 2", () => {
    for (const { log10BayesFactor } of truths) {
      const [low, middle, high] = log10BayesFactor!;
      const at = (z: number) => (d * z + (d * d) / 2) / Math.LN10;
      // Standard errors of these quantiles at 2,000 runs: 0.06, 0.028 and 0.06 of an sd.
      expect(Math.abs(low! - at(-1.96))).toBeLessThan((0.25 * d) / Math.LN10);
      expect(Math.abs(middle! - at(0))).toBeLessThan((0.12 * d) / Math.LN10);
      expect(Math.abs(high! - at(1.96))).toBeLessThan((0.25 * d) / Math.LN10);
    }
  });
});

test("the same input gives the same bytes", () => {
  const candidates = [{ key: "a", measurand: "may", sd: 1, chance: 0.7 }];
  const once = simulated(two(1), { candidates, runs: 30 });
  expect(JSON.stringify(simulated(two(1), { candidates, runs: 30 }))).toBe(JSON.stringify(once));
});

test("a shared error and a common theory error are drawn once for a campaign", () => {
  // Ten readings of sd 0.01 differ from one another by that only: their mean is as uncertain as the
  // shared error, so that the true one leads hardly more often than from one reading.
  const parts = {
    ...two(1),
    sharedErrors: [{ key: "zero", sd: 1 }],
  };
  const candidates = Array.from({ length: 10 }, (_, i) => ({
    key: `c${i}`,
    measurand: "may",
    sd: 0.01,
    shared: [{ error: "zero" }],
  }));
  const { truths } = simulated(parts, { candidates, runs: 600 });
  for (const { leads } of truths) expect(Math.abs(leads - normalCdf(0.5))).toBeLessThan(0.08);
});

test("calibrated: of campaigns that give a hypothesis a posterior above 0.9, at least nine in ten are its own", () => {
  const { truths } = simulated(two(1), {
    candidates: [{ key: "a", measurand: "may", sd: 0.5 }],
    runs: 500,
  });
  // By symmetry: P(wrong by log10 B > 1) <= P(right by as much) / 10 (Royall, 1997).
  for (const { misleading, leadsDecisively } of truths) {
    expect(misleading).toBeLessThan(leadsDecisively / 10 + 0.01);
  }
});
