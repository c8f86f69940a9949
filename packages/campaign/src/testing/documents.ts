import { constantFrom } from "fast-check";
import type { CampaignDocument, Measurement } from "../document";
import { measurementSchema } from "../measurement";
import type { Problem } from "../problem";
import { readCampaign } from "../read";

/** A measurement with the fields given and every other at its default. */
export function quantity(fields: Partial<Measurement>): Measurement {
  return measurementSchema.parse({ id: "m-1", measurand: "level", ...fields });
}

/** Any JSON value, open to be changed by a test. */
// oxlint-disable-next-line typescript/no-explicit-any -- Tests break documents in every place.
export type Open = any;

/**
 * An invented campaign that has every kind of part: on each scale a measurand, each family of
 * reference, prior and tolerance, each form of result.
 */
export function duneDocument(): Open {
  return structuredClone(dune);
}

/** The invented campaign changed in one way, and what is wrong with it then. */
export function problemsAfter(change: (document: Open) => void): Problem[] {
  const document = duneDocument();
  change(document);
  const read = readCampaign(document);
  return read.ok ? [] : read.problems;
}

/** Every place in a document, as the steps that lead there. */
export function placesOf(value: Open, path: (string | number)[] = []): (string | number)[][] {
  if (typeof value !== "object" || value === null) return [path];
  return [
    ...(path.length > 0 ? [path] : []),
    ...Object.keys(value).flatMap((name) =>
      placesOf(value[name], [...path, Array.isArray(value) ? Number(name) : name]),
    ),
  ];
}

/** The document with another value at one place. */
export function put(document: Open, path: (string | number)[], value: unknown): Open {
  const holder = path.slice(0, -1).reduce<Open>((at, step) => at[step], document);
  holder[path.at(-1)!] = structuredClone(value);
  return document;
}

/** Values that belong nowhere, or nearly so. */
export const junk = constantFrom<unknown>(
  { odd: true },
  { family: "odd" },
  {},
  ["odd"],
  [],
  true,
  null,
  "",
  "Odd Text!\u0001",
  "odd-key",
  "x".repeat(501),
  "2031-02-29T00:00:00Z",
  -7.5,
  0,
  1e300,
);

export function readWhole(document: unknown): CampaignDocument {
  const read = readCampaign(document);
  if (!read.ok) throw new Error(JSON.stringify(read.problems, null, 1));
  return read.value;
}

const spring = { from: "2031-03-01T00:00:00Z", to: "2031-06-01T00:00:00Z" };
const dune = {
  format: "weighhouse-campaign/1",
  campaign: { key: "singing-dune", title: "Why the dune sings" },
  observables: [
    {
      key: "pitch",
      title: "Pitch",
      unit: "Hz",
      scale: "linear",
      conditions: [
        { key: "slope", unit: "deg" },
        { key: "day", unit: "d", time: { epoch: "2031-03-01T00:00:00Z" } },
        {
          key: "humidity",
          unit: "%",
          time: {
            table: [
              ["2031-03-01T00:00:00Z", 20],
              ["2031-04-01T00:00:00Z", 40],
              ["2031-06-01T00:00:00Z", 10],
            ],
          },
        },
      ],
    },
    { key: "grain", title: "Grain size", unit: "mm", scale: "log10" },
    { key: "ripple", title: "Ripple bearing", unit: "deg", scale: "cyclic", period: 180 },
    { key: "shimmer", title: "Shimmer", unit: "mag", scale: "magnitude" },
    { key: "slide", title: "A slide", scale: "event" },
    { key: "booms", title: "Booms an hour", unit: "1", scale: "count" },
  ],
  measurands: [
    {
      key: "pitch-curve",
      observable: "pitch",
      window: { ...spring },
      where: { slope: [20, 40] },
      shape: "curve",
      reference: { family: "polynomial", in: "slope", degree: 2, centre: 80, sd: 20 },
    },
    {
      key: "pitch-crest",
      observable: "pitch",
      window: { ...spring },
      where: { slope: [25, 35] },
      reference: { family: "uniform", lower: 20, upper: 200 },
      thresholds: [{ key: "audible", value: 25 }],
    },
    { key: "grain-crest", observable: "grain", reference: { family: "normal", mean: 0.2, sd: 1 } },
    {
      key: "grain-foot",
      observable: "grain",
      reference: { family: "uniform", lower: 0.01, upper: 2 },
    },
    { key: "ripple-crest", observable: "ripple" },
    {
      key: "shimmer-noon",
      observable: "shimmer",
      reference: { family: "normal", mean: 20, sd: 3 },
    },
    { key: "slide-april", observable: "slide" },
    { key: "booms-april", observable: "booms", reference: { family: "gamma", mean: 3, sd: 3 } },
  ],
  derived: [
    {
      key: "grain-ratio",
      observable: "grain",
      expression: "crest / foot",
      from: { crest: "grain-crest", foot: "grain-foot" },
      reference: { family: "uniform", lower: 0.01, upper: 100 },
    },
  ],
  sharedErrors: [
    { key: "tuning", sd: 0.02, relative: true },
    { key: "night-zero", sd: 0.5, per: "batch" },
  ],
  facilities: [{ key: "north-mast" }, { key: "south-mast" }],
  teams: [{ key: "slip" }, { key: "echo" }],
  hypotheses: [
    {
      key: "slip-layer",
      title: "A slipping layer",
      team: "slip",
      registeredAt: "2031-02-10T09:00:00Z",
      parameters: [
        { key: "f0", unit: "Hz", prior: { family: "normal", mean: 80, sd: 10 } },
        { key: "n", prior: { family: "uniform", lower: 0.5, upper: 2 } },
        { key: "k", prior: { family: "lognormal", median: 2, sdLog10: 0.3 } },
        { key: "b", prior: { family: "loguniform", lower: 0.1, upper: 10 } },
        { key: "h", prior: { family: "halfnormal", sd: 1 } },
        { key: "c", prior: { family: "fixed", value: 3 } },
      ],
      tables: [
        { key: "grid", in: ["slope"], at: [[20, 30, 40]], values: [70, 80, 95] },
        {
          key: "plane",
          in: ["slope", "day"],
          at: [
            [20, 40],
            [0, 100],
          ],
          values: [
            [1, 2],
            [3, 4],
          ],
        },
      ],
      ensemble: { columns: { d: [1.2, 1.4, 0.9] }, weights: [1, 1, 2] },
      predictions: [
        {
          measurand: "pitch-curve",
          expected:
            "f0 * (slope / 30) ^ n + table(grid, slope) / 100 + table(plane, slope, day) * 0",
          tolerance: { family: "normal", sd: 2, sharing: "smooth", in: "slope", length: 5 },
        },
        {
          measurand: "pitch-crest",
          expected: "f0 + h + c",
          tolerance: { family: "normal", sd: 3 },
        },
        {
          measurand: "grain-crest",
          expected: "d * b / k",
          tolerance: { family: "normal", sd: 0.2, relative: true },
        },
        { measurand: "grain-foot", tolerance: { family: "interval", lower: 0.1, upper: 0.4 } },
        {
          measurand: "ripple-crest",
          expected: 170,
          tolerance: { family: "normal", sd: 5, sharing: "each" },
        },
        {
          measurand: "shimmer-noon",
          expected: 21,
          tolerance: { family: "splitNormal", plus: 2, minus: 1 },
          decisive: true,
        },
        { measurand: "slide-april", probability: 0.9 },
        {
          measurand: "booms-april",
          tolerance: { family: "gamma", mean: 4, sd: 2 },
          given: { measurand: "slide-april", occurred: true },
        },
      ],
      toleranceCorrelations: [{ a: "pitch-crest", b: "grain-crest", coefficient: 0.5 }],
    },
    {
      key: "air-column",
      title: "An air column",
      team: "echo",
      registeredAt: "2031-02-11T09:00:00Z",
      withheld: ["grain-crest"],
      predictions: [
        { measurand: "pitch-crest", tolerance: { family: "atMost", bound: 90 } },
        { measurand: "grain-foot", tolerance: { family: "atLeast", bound: 0.2 } },
        { measurand: "grain-ratio", expected: 1.5 },
        { measurand: "ripple-crest", tolerance: { family: "interval", lower: 170, upper: 10 } },
        { measurand: "booms-april", expected: 3 },
      ],
    },
  ],
  measurements: [
    {
      id: "north:1",
      measurand: "pitch-curve",
      facility: "north-mast",
      team: "slip",
      batch: "n1",
      observedAt: "2031-03-11T12:00:00Z",
      postedAt: "2031-03-12T08:00:00Z",
      conditions: { slope: 31 },
      value: 81,
      sd: 2,
      unit: "Hz",
      shared: [{ error: "tuning" }, { error: "night-zero", coefficient: -1 }],
      extra: { gauge: "B", run: 7 },
    },
    {
      id: "north:2",
      measurand: "pitch-crest",
      observedAt: "2031-03-05T00:00:00Z",
      value: 0.079,
      plus: 0.002,
      minus: 0.001,
      unit: "kHz",
    },
    { id: "south:1", measurand: "grain-crest", value: 0.25, sdDex: 0.05 },
    { id: "south:2", measurand: "grain-crest", value: -0.02, sd: 0.05, noise: "linear" },
    {
      id: "south:3",
      measurand: "grain-crest",
      limit: "upper",
      value: 0.4,
      confidence: 0.95,
      noise: "linear",
    },
    { id: "south:4", measurand: "grain-foot", value: 250, sd: 20, unit: "um" },
    { id: "south:5", measurand: "pitch-crest", limit: "upper", value: 120, sigmas: 3 },
    { id: "south:6", measurand: "pitch-crest", limit: "lower", value: 60, sd: 4 },
    { id: "south:7", measurand: "ripple-crest", value: 3, sd: 2 },
    { id: "south:8", measurand: "shimmer-noon", limit: "fainter", value: 22.4, sigmas: 5 },
    { id: "south:9", measurand: "shimmer-noon", limit: "brighter", value: 18, sd: 0.1 },
    { id: "south:10", measurand: "shimmer-noon", value: 21.1, sd: 0.2 },
    { id: "mast:1", measurand: "slide-april", occurred: true, efficiency: 0.9, falseAlarm: 0.02 },
    { id: "mast:2", measurand: "booms-april", count: 6, exposure: 2, background: 0.5 },
    {
      id: "mast:3",
      measurand: "grain-foot",
      value: 0.3,
      setAside: { reason: "no uncertainty given" },
      sameData: "tray-7",
    },
  ],
  correlations: [{ a: "south:7", b: "south:10", coefficient: 0.35 }],
};
