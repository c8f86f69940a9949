import * as fc from "fast-check";
import { describe, expect, test } from "vitest";
import type { CampaignDocument } from "@weighhouse/campaign/document";
import { standingsSchema } from "@weighhouse/campaign/standings";
import type { Standings } from "@weighhouse/campaign/standings";
import { scoreCampaign } from "./score";
import { denseCombination, denseScore, type Said } from "./testing/dense";
import { campaigns } from "./testing/random-campaigns";

/** The accuracy that closed forms and one-dimensional quadrature are held to. */
const ACCURACY = 1e-9;

function near(found: number | null, expected: number | null, what: string): void {
  if (found === null || expected === null) expect(found, what).toBe(expected);
  else {
    const allowed = ACCURACY * Math.max(1, Math.abs(expected));
    expect(Math.abs(found - expected), `${what}: ${found} for ${expected}`).toBeLessThan(allowed);
  }
}

function scored(document: CampaignDocument): Standings {
  const result = scoreCampaign(document);
  if (!result.ok) throw new Error(JSON.stringify(result.problems));
  return standingsSchema.parse(result.value);
}

/** What a hypothesis (or nobody) says of the measurands named. */
function saidBy(document: CampaignDocument, key: string | null, only?: Set<string>): Said {
  const predictions = document.hypotheses.find((one) => one.key === key)?.predictions ?? [];
  const said: Said = new Map();
  for (const { key: measurand } of document.measurands) {
    if (only !== undefined && !only.has(measurand)) continue;
    said.set(measurand, predictions.find((one) => one.measurand === measurand) ?? null);
  }
  return said;
}

function compare(document: CampaignDocument): void {
  const standings = scored(document);
  near(
    standings.noModel.lnEvidence,
    denseScore(document, saidBy(document, null)).lnEvidence,
    "noModel",
  );
  for (const { key, lnEvidence, chiSquare } of standings.hypotheses) {
    const dense = denseScore(document, saidBy(document, key));
    near(lnEvidence, dense.lnEvidence, `ln evidence of ${key}`);
    near(chiSquare, dense.chiSquare, `chi-square of ${key}`);
  }
  for (const { key, combined } of standings.measurands) {
    const dense = denseCombination(document, key);
    near(combined?.value ?? null, dense && natural(document, key, dense.value), `value of ${key}`);
    near(combined?.sd ?? null, dense && dense.sd, `sd of ${key}`);
    near(combined?.chiSquare ?? null, dense && dense.chiSquare, `chi-square within ${key}`);
  }
  for (const { a, b, commonGround } of standings.pairs) {
    if (commonGround.log10BayesFactor === null) continue;
    const both = new Set(
      [...saidBy(document, a)]
        .filter(([key, said]) => said !== null && saidBy(document, b).get(key) !== null)
        .map(([key]) => key),
    );
    const [zA, zB] = [a, b].map((key) => denseScore(document, saidBy(document, key, both)));
    const expected = (zA!.lnEvidence - zB!.lnEvidence) / Math.LN10;
    near(commonGround.log10BayesFactor, expected, `common ground of ${a} and ${b}`);
  }
}

function natural(document: CampaignDocument, key: string, value: number): number {
  const { observable } = document.measurands.find((one) => one.key === key)!;
  return observable === "log" ? 10 ** value : value;
}

describe("the engine agrees with a plain dense computation to 1e-9", () => {
  const measurements = { least: 1, most: 14 };

  test("on 500 random campaigns", { timeout: 300_000 }, () => {
    fc.assert(fc.property(campaigns({ level: 0, unit: 1, flats: 2, measurements }), compare), {
      numRuns: 500,
      seed: 20310301,
    });
  });

  test("on values near 2,460,000 with uncertainties of 0.0001", { timeout: 300_000 }, () => {
    fc.assert(
      fc.property(campaigns({ level: 2_460_000, unit: 1e-4, flats: 2, measurements }), compare),
      { numRuns: 200, seed: 20310302 },
    );
  });

  test("on 60 to 90 measurements at once", { timeout: 300_000 }, () => {
    const many = { level: 0, unit: 1, flats: 0, measurements: { least: 60, most: 90 } };
    fc.assert(fc.property(campaigns(many), compare), { numRuns: 25, seed: 20310303 });
  });
});
