import * as fc from "fast-check";
import { expect, test } from "vitest";
import { readCampaign } from "@weighhouse/campaign/read";
import { problemLine } from "@weighhouse/campaign/problem";
import { standingsSchema } from "@weighhouse/campaign/standings";
import { placesOf, put } from "@weighhouse/campaign/testing/documents";
import { scoreCampaign } from "./score";
import { faultOf, mutant } from "./testing/mutations";

/** An invented campaign with each part that is scored; every one of its values is changed in turn. */
const whole = {
  format: "weighhouse-campaign/1",
  campaign: {
    key: "well",
    title: "Well",
    registrationCloses: "2031-05-01T00:00:00Z",
    rule: { coverage: 2, pass: 0.95, fail: 0.05 },
    noneOfThese: { weight: 0.5 },
  },
  observables: [
    { key: "level", title: "Level", unit: "m", scale: "linear" },
    { key: "flow", title: "Flow", unit: "kg/s", scale: "log10" },
  ],
  measurands: [
    {
      key: "spring",
      observable: "level",
      scatter: 0.1,
      window: { from: "2031-03-01T00:00:00Z", to: "2031-04-01T00:00:00Z" },
      reference: { family: "uniform", lower: 0, upper: 10, scatter: 0.2 },
      thresholds: [{ key: "flood", value: 7 }],
    },
    { key: "autumn", observable: "level", reference: { family: "normal", mean: 3, sd: 2 } },
    {
      key: "pumped",
      observable: "flow",
      reference: { family: "uniform", lower: 0.1, upper: 100 },
      thresholds: [{ key: "dry", value: 0.5 }],
    },
    { key: "lost", observable: "flow", reference: { family: "normal", mean: 3, sd: 1 } },
  ],
  sharedErrors: [
    { key: "zero", sd: 0.2 },
    { key: "night", sd: 0.1, per: "batch" },
  ],
  hypotheses: [
    {
      key: "rain",
      title: "Rain",
      group: "weather",
      weight: 2,
      registeredAt: "2031-02-01T00:00:00Z",
      predictions: [
        { measurand: "spring", expected: 5, tolerance: { family: "normal", sd: 0.5 } },
        { measurand: "autumn", expected: 4, decisive: true },
        {
          measurand: "pumped",
          expected: 8,
          tolerance: { family: "normal", sd: 0.3, relative: true, sharing: "each" },
        },
      ],
    },
    {
      key: "leak",
      title: "Leak",
      withheld: ["lost"],
      predictions: [{ measurand: "pumped", expected: "2 ^ 3 / 4", registeredAt: null }],
    },
  ],
  measurements: [
    {
      id: "a",
      measurand: "spring",
      batch: "one",
      observedAt: "2031-03-05T00:00:00Z",
      postedAt: "2031-03-06T00:00:00Z",
      value: 480,
      sd: 30,
      unit: "cm",
      shared: [{ error: "zero", coefficient: 1 }, { error: "night" }],
    },
    { id: "b", measurand: "spring", value: 5.2, sd: 0.4, shared: [{ error: "zero" }] },
    { id: "c", measurand: "pumped", batch: "one", value: 7, sdDex: 0.1 },
    { id: "d", measurand: "pumped", value: 9, sd: 1, shared: [{ error: "zero" }] },
    { id: "e", measurand: "autumn", value: 3.6, sd: 0.2, status: "provisional", sameData: "x" },
    { id: "f", measurand: "autumn", value: 3.9, sameData: "x", setAside: { reason: "no sd" } },
  ],
};
const places = placesOf(whole);

const sizes = [0, 5e-324, 1e-300, 1e-160, 1e-140, 1e-9, 1, 2460000.00001, 1e9, 1e140, 1e155, 1e300];
const extremes = fc.constantFrom(
  ...sizes,
  ...sizes.map((size) => -size),
  Number.MAX_VALUE,
  -Number.MAX_VALUE,
);
const values = fc.oneof(
  { weight: 6, arbitrary: extremes },
  { weight: 2, arbitrary: fc.double({ noNaN: true, noDefaultInfinity: true }) },
  {
    weight: 2,
    arbitrary: fc.constantFrom(null, true, "", "odd", "2031-03-06T00:00:00Z", [], {}, ["a"]),
  },
);
const isNumber = (path: (string | number)[]) =>
  typeof path.reduce<unknown>((at, step) => (at as never)[step], whole) === "number";
const anywhere = fc.oneof(
  { weight: 3, arbitrary: fc.constantFrom(...places.filter(isNumber)) },
  { weight: 1, arbitrary: fc.constantFrom(...places) },
);

test("whatever stands in a document, it is refused at its place or scored in finite numbers", () => {
  let scoredOnes = 0;
  let refused = 0;
  fc.assert(
    fc.property(fc.array(fc.tuple(anywhere, values), { minLength: 1, maxLength: 3 }), (changes) => {
      const document = structuredClone(whole);
      for (const [path, value] of changes) {
        const holder = path.slice(0, -1).reduce<unknown>((at, step) => {
          return typeof at === "object" && at !== null ? (at as never)[step] : undefined;
        }, document);
        if (typeof holder === "object" && holder !== null) put(document, path, value);
      }
      const read = readCampaign(document);
      const scored = read.ok ? scoreCampaign(read.value) : read;
      if (!scored.ok) {
        refused += 1;
        expect(scored.problems.length).toBeGreaterThan(0);
        for (const problem of scored.problems) {
          expect(problem.pointer).toMatch(/^(\/|$)/);
          expect(problemLine(problem)).not.toMatch(/undefined|NaN/);
        }
        return;
      }
      scoredOnes += 1;
      // The schema refuses NaN and infinite numbers, and JSON would turn them into null.
      const parsed = standingsSchema.parse(scored.value);
      expect(JSON.parse(JSON.stringify(scored.value))).toEqual(JSON.parse(JSON.stringify(parsed)));
      for (const { posterior } of parsed.hypotheses) {
        expect(posterior).toBeGreaterThanOrEqual(0);
        expect(posterior).toBeLessThanOrEqual(1 + 1e-12);
      }
      for (const { conformance, sd } of parsed.verdicts) {
        if (conformance !== null) expect(conformance).toBeLessThanOrEqual(1 + 1e-12);
        if (sd !== null) expect(sd).toBeGreaterThan(0);
      }
    }),
    { numRuns: 300, seed: 20310301 },
  );
  // Neither way out is the only one.
  expect(Math.min(scoredOnes, refused)).toBeGreaterThan(30);
});

// Scored in closed form or on the line, many of them in little time; a longer run of all is by hand.
const quick = [
  "events",
  "asymmetric",
  "sharedErrors",
  "correlated",
  "derivedValues",
  "polynomialCurves",
  "smoothCurves",
  "levelCurves",
  "tolerances",
  "tablesAndEnsembles",
  "course",
] as const;
const sampled = ["counts", "cyclic", "magnitude", "limits", "logarithmic", "priors"] as const;

test.each([
  [quick, 1, 60],
  [sampled, 10_001, 8],
] as const)(
  "a document of whatever form, changed, has standings or reasons (%#)",
  (among, first, many) => {
    let scoredOnes = 0;
    for (let seed = first; seed < first + many; seed += 1) {
      const { name, document, changes } = mutant(seed, among);
      const { fault, scored } = faultOf(document);
      expect(fault, `${seed}, ${name}: ${changes.join("; ")}`).toBeNull();
      if (scored) scoredOnes += 1;
    }
    expect(scoredOnes).toBeGreaterThan(many / 20);
    expect(scoredOnes).toBeLessThan(many);
  },
);
