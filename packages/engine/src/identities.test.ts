import * as fc from "fast-check";
import { describe, expect, test } from "vitest";
import type { CampaignDocument, Measurement } from "@weighhouse/campaign/document";
import type { Standings } from "@weighhouse/campaign/standings";
import { standingsFrom } from "./testing/documents";
import { campaigns } from "./testing/random-campaigns";

/** What must hold of any right scoring, whatever the campaign. */
const spread = { level: 0, unit: 1, flats: 1, measurements: { least: 1, most: 10 } };
const runs = { numRuns: 100, seed: 20310308 };

function near(found: number | null, expected: number | null, allowed = 1e-9): void {
  if (found === null || expected === null) expect(found).toBe(expected);
  else {
    const size = allowed * Math.max(1, Math.abs(expected));
    expect(Math.abs(found - expected)).toBeLessThan(size);
  }
}

function sorted({ hypotheses }: Standings) {
  return [...hypotheses].sort((a, b) => (a.key < b.key ? -1 : 1));
}

function countedOn(document: CampaignDocument, keys: ReadonlySet<string>) {
  return document.measurements.filter((one) => one.setAside === null && keys.has(one.measurand));
}

describe("identities", () => {
  test("in another unit each evidence moves by N ln(factor), and nothing else does", () => {
    const factor = 1000;
    const linear = campaigns(spread).filter(({ measurands }) =>
      measurands.every(({ observable }) => observable === "plain"),
    );
    fc.assert(
      fc.property(linear, (document) => {
        const before = standingsFrom(document);
        const after = standingsFrom(scaled(document, factor));
        const moved = before.measurements.counted * Math.log(factor);
        sorted(before).forEach((one, i) => {
          const other = sorted(after)[i]!;
          near(other.lnEvidence, one.lnEvidence! - moved);
          near(other.chiSquare, one.chiSquare);
          near(other.log10BayesFactor, one.log10BayesFactor);
          near(other.posterior, one.posterior);
          expect(other.verdicts).toEqual(one.verdicts);
        });
      }),
      runs,
    );
  });

  test("the order of measurements, measurands and hypotheses doesn't matter", () => {
    fc.assert(
      fc.property(campaigns(spread), (document) => {
        const turned = {
          ...document,
          measurands: document.measurands.toReversed(),
          hypotheses: document.hypotheses.toReversed(),
          measurements: document.measurements.toReversed(),
        };
        const [one, other] = [standingsFrom(document), standingsFrom(turned)];
        near(other.noModel.lnEvidence, one.noModel.lnEvidence);
        sorted(one).forEach((standing, i) => {
          near(sorted(other)[i]!.lnEvidence, standing.lnEvidence);
          near(sorted(other)[i]!.chiSquare, standing.chiSquare);
        });
      }),
      runs,
    );
  });

  test("a measurement split in two of sqrt 2 its sd compares hypotheses alike", () => {
    // Two readings of one value are one of their mean, where each adds no noise of its own.
    const common = campaigns(spread).map(withoutOwnNoise);
    fc.assert(
      fc.property(common, (document) => {
        const [one, other] = [standingsFrom(document), standingsFrom(split(document))];
        for (const { a, b, log10BayesFactor } of one.pairs) {
          const [found, reversed] = [
            other.pairs.find((pair) => pair.a === a && pair.b === b),
            other.pairs.find((pair) => pair.a === b && pair.b === a),
          ];
          near(found?.log10BayesFactor ?? -reversed!.log10BayesFactor!, log10BayesFactor);
        }
        one.measurands.forEach(({ combined }, m) => {
          near(other.measurands[m]!.combined?.value ?? null, combined?.value ?? null);
          near(other.measurands[m]!.combined?.sd ?? null, combined?.sd ?? null);
          near(other.measurands[m]!.combined?.chiSquare ?? null, combined?.chiSquare ?? null);
        });
        sorted(one).forEach(({ chiSquare }, i) => near(sorted(other)[i]!.chiSquare, chiSquare));
      }),
      runs,
    );
  });

  test("evidences of measurands without a shared error multiply", () => {
    const apart = campaigns(spread).map((document) => ({
      ...document,
      measurements: document.measurements.map((one) => ({ ...one, shared: [] })),
    }));
    fc.assert(
      fc.property(apart, (document) => {
        const whole = standingsFrom(document);
        const alone = document.measurands.map(({ key }) => {
          const measurements = countedOn(document, new Set([key]));
          return standingsFrom({ ...document, measurements });
        });
        near(
          whole.noModel.lnEvidence,
          alone.reduce((sum, { noModel }) => sum + noModel.lnEvidence!, 0),
        );
        sorted(whole).forEach(({ lnEvidence }, i) => {
          near(
            lnEvidence,
            alone.reduce((sum, one) => sum + sorted(one)[i]!.lnEvidence!, 0),
          );
        });
      }),
      runs,
    );
  });
});

function scaled(document: CampaignDocument, factor: number): CampaignDocument {
  const times = (value: number | null) => (value === null ? null : value * factor);
  return {
    ...document,
    measurands: document.measurands.map((one) => {
      const { reference } = one;
      const scatter = reference!.scatter * factor;
      return {
        ...one,
        scatter: one.scatter * factor,
        reference:
          reference?.family === "uniform"
            ? {
                ...reference,
                lower: reference.lower * factor,
                upper: reference.upper * factor,
                scatter,
              }
            : reference?.family === "normal"
              ? { ...reference, mean: reference.mean * factor, sd: reference.sd * factor, scatter }
              : reference,
      };
    }),
    sharedErrors: document.sharedErrors.map((one) => ({ ...one, sd: one.sd * factor })),
    hypotheses: document.hypotheses.map((one) => ({
      ...one,
      predictions: one.predictions.map((prediction) => ({
        ...prediction,
        expected: times(prediction.expected as number | null),
        tolerance:
          prediction.tolerance?.family === "normal" && !prediction.tolerance.relative
            ? { ...prediction.tolerance, sd: prediction.tolerance.sd * factor }
            : prediction.tolerance,
      })),
    })),
    measurements: document.measurements.map((one) => ({
      ...one,
      value: times(one.value),
      sd: times(one.sd),
    })),
  };
}

function withoutOwnNoise(document: CampaignDocument): CampaignDocument {
  return {
    ...document,
    measurands: document.measurands.map((one) => ({
      ...one,
      scatter: 0,
      reference: { ...one.reference!, scatter: 0 },
    })),
    hypotheses: document.hypotheses.map((one) => ({
      ...one,
      predictions: one.predictions.map((prediction) => ({
        ...prediction,
        tolerance:
          prediction.tolerance?.family === "normal"
            ? { ...prediction.tolerance, sharing: "common" as const }
            : prediction.tolerance,
      })),
    })),
  };
}

function split(document: CampaignDocument): CampaignDocument {
  const wider = (sd: number | null) => (sd === null ? null : sd * Math.SQRT2);
  const half = (one: Measurement, id: string) => ({
    ...one,
    id,
    sd: wider(one.sd),
    sdDex: wider(one.sdDex),
  });
  return {
    ...document,
    measurements: document.measurements.flatMap((one) => [
      half(one, one.id),
      half(one, `${one.id}b`),
    ]),
  };
}
