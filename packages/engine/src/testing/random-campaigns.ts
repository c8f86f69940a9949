import * as fc from "fast-check";
import type { CampaignDocument } from "@weighhouse/campaign/document";
import { documentFrom } from "./documents";

/**
 * Random campaigns of everything that is scored today: linear and log10 measurands, uniform and
 * normal references with and without scatter of their own, exact, common, each and relative
 * tolerances, shared errors common and per batch, silence.
 */
export interface Spread {
  /** The level of linear values, and the size of everything that varies about it. */
  level: number;
  unit: number;
  /** Most uniform references in one campaign. */
  flats: number;
  measurements: { least: number; most: number };
}

export function campaigns(spread: Spread): fc.Arbitrary<CampaignDocument> {
  return fc
    .record({
      measurands: fc.array(measurandPlan, { minLength: 1, maxLength: 4 }),
      errors: fc.array(fc.record({ sd: share(0.2, 3), batch: fc.boolean() }), { maxLength: 3 }),
      hypotheses: fc.array(fc.array(predictionPlan, { minLength: 4, maxLength: 4 }), {
        minLength: 1,
        maxLength: 3,
      }),
      measurements: fc.array(measurementPlan, {
        minLength: spread.measurements.least,
        maxLength: spread.measurements.most,
      }),
    })
    .map((plan) => build(plan, spread));
}

/** Numbers to three digits: they read well where a campaign is shrunk. */
function share(lower: number, upper: number): fc.Arbitrary<number> {
  return fc
    .integer({ min: Math.round(lower * 1000), max: Math.round(upper * 1000) })
    .map((n) => n / 1000);
}

const measurandPlan = fc.record({
  log10: fc.boolean(),
  uniform: fc.boolean(),
  scatter: fc.oneof(fc.constant(0), share(0.1, 1)),
  referenceScatter: fc.oneof(fc.constant(0), share(0.1, 2)),
  centre: share(-3, 3),
  width: share(2, 20),
});
const predictionPlan = fc.record({
  speaks: fc.integer({ min: 0, max: 3 }).map((n) => n > 0),
  offset: share(-3, 3),
  tolerance: fc.constantFrom("exact", "common", "each", "relative"),
  sd: share(0.05, 4),
});
const measurementPlan = fc.record({
  measurand: fc.nat({ max: 3 }),
  offset: share(-4, 4),
  sd: share(0.2, 3),
  batch: fc.constantFrom("night-1", "night-2", "night-3"),
  dex: fc.boolean(),
  loads: fc.array(fc.oneof(fc.constant(0), fc.constant(1), share(-2, 2)), {
    minLength: 3,
    maxLength: 3,
  }),
  setAside: fc.integer({ min: 0, max: 9 }).map((n) => n === 0),
});

type PlanOf<A> = A extends fc.Arbitrary<infer T> ? T : never;
interface Plan {
  measurands: PlanOf<typeof measurandPlan>[];
  errors: { sd: number; batch: boolean }[];
  hypotheses: PlanOf<typeof predictionPlan>[][];
  measurements: PlanOf<typeof measurementPlan>[];
}

function build(plan: Plan, spread: Spread): CampaignDocument {
  const { unit } = spread;
  // On log10 one unit is a tenth of a dex; the level is 1.
  const value = (log10: boolean, offset: number) =>
    log10 ? 10 ** (offset / 10) : spread.level + unit * offset;
  const size = (log10: boolean, sd: number) => (log10 ? sd / 10 : sd * unit);
  let flats = 0;
  const measurands = plan.measurands.map((one, m) => {
    const uniform = one.uniform && (flats += 1) <= spread.flats;
    const scatter = size(one.log10, one.referenceScatter);
    const reference = uniform
      ? {
          family: "uniform",
          lower: value(one.log10, one.centre - one.width / 2),
          upper: value(one.log10, one.centre + one.width / 2),
          scatter,
        }
      : {
          family: "normal",
          mean: value(one.log10, one.centre),
          sd: size(one.log10, one.width / 2),
          scatter,
        };
    const observable = one.log10 ? "log" : "plain";
    return { key: `m${m}`, observable, scatter: size(one.log10, one.scatter), reference };
  });
  return documentFrom({
    observables: [
      { key: "plain", title: "Plain", unit: "m", scale: "linear" },
      { key: "log", title: "Log", unit: "m", scale: "log10" },
    ],
    measurands,
    sharedErrors: plan.errors.map(({ sd, batch }, e) => ({
      key: `e${e}`,
      sd: sd * Math.min(unit, 0.1),
      per: batch ? "batch" : null,
    })),
    hypotheses: plan.hypotheses.map((predictions, h) => ({
      key: `h${h}`,
      title: `H${h}`,
      predictions: plan.measurands.flatMap(({ log10 }, m) => {
        const { speaks, offset, tolerance, sd } = predictions[m]!;
        if (!speaks) return [];
        const expected = value(log10, offset);
        if (tolerance === "exact") return [{ measurand: `m${m}`, expected }];
        const relative = tolerance === "relative";
        const natural = log10 ? sd / 10 : (sd * unit) / Math.max(Math.abs(expected), unit);
        return [
          {
            measurand: `m${m}`,
            expected,
            tolerance: {
              family: "normal",
              sd: relative ? natural : size(log10, sd),
              relative,
              sharing: tolerance === "each" ? "each" : "common",
            },
          },
        ];
      }),
    })),
    measurements: plan.measurements.map((one, i) => {
      const m = one.measurand % plan.measurands.length;
      const { log10 } = plan.measurands[m]!;
      const measured = value(log10, one.offset);
      const dex = log10 && one.dex;
      const shared = plan.errors.flatMap((_, e) =>
        one.loads[e] === 0 ? [] : [{ error: `e${e}`, coefficient: one.loads[e] }],
      );
      return {
        id: `x${i}`,
        measurand: `m${m}`,
        batch: one.batch,
        value: measured,
        sd: dex ? null : log10 ? one.sd * 0.1 * measured : one.sd * unit,
        sdDex: dex ? one.sd / 10 : null,
        setAside: one.setAside ? { reason: "for the test" } : null,
        shared,
      };
    }),
  });
}
