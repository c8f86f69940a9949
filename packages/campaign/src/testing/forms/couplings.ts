import type { Form } from "./form";

/** Asymmetric uncertainties, alone and several of one quantity. */
export const asymmetric: Form = {
  observables: [{ key: "age", title: "Age of a weld", unit: "yr", scale: "linear" }],
  measurands: [
    { key: "age-east", observable: "age", reference: { family: "uniform", lower: 0, upper: 150 } },
    { key: "age-west", observable: "age", reference: { family: "normal", mean: 60, sd: 30 } },
  ],
  vortex: {
    predictions: [
      { measurand: "age-east", expected: 41 },
      { measurand: "age-west", expected: 70, tolerance: { family: "normal", sd: 5 } },
    ],
  },
  cable: {
    predictions: [
      { measurand: "age-east", tolerance: { family: "interval", lower: 50, upper: 60 } },
      {
        measurand: "age-west",
        expected: 55,
        tolerance: { family: "normal", sd: 8, sharing: "each" },
      },
    ],
  },
  measurements: [
    { id: "age:1", measurand: "age-east", value: 40, plus: 6, minus: 2 },
    { id: "age:2", measurand: "age-west", value: 66, plus: 4, minus: 7 },
    { id: "age:3", measurand: "age-west", value: 71, plus: 9, minus: 3 },
    { id: "age:4", measurand: "age-west", value: 68, sd: 4 },
  ],
};

/** Shared errors of each kind, in one quantity and across several. */
export const sharedErrors: Form = {
  observables: [
    { key: "force", title: "Force", unit: "N", scale: "linear" },
    { key: "dust", title: "Dust", unit: "ug/m3", scale: "log10" },
  ],
  measurands: [
    { key: "force-a", observable: "force", reference: { family: "uniform", lower: 0, upper: 20 } },
    { key: "force-b", observable: "force", reference: { family: "normal", mean: 8, sd: 5 } },
    { key: "dust-quay", observable: "dust", reference: { family: "normal", mean: 20, sd: 0.6 } },
  ],
  sharedErrors: [
    { key: "offset-load", title: "Zero of the load cell", sd: 0.3 },
    { key: "gain-load", title: "Gain of the load cell", sd: 0.04, relative: true },
    { key: "night-load", title: "Drift of a night", sd: 0.2, per: "batch" },
    { key: "pump", title: "Flow of the pump", sd: 0.1, relative: true, per: "batch" },
  ],
  vortex: {
    parameters: [{ key: "lift", unit: "N", prior: { family: "normal", mean: 8, sd: 2 } }],
    predictions: [
      { measurand: "force-a", expected: "lift", tolerance: { family: "normal", sd: 0.5 } },
      { measurand: "force-b", expected: "lift + 2", tolerance: { family: "normal", sd: 0.5 } },
      { measurand: "dust-quay", expected: 25, tolerance: { family: "normal", sd: 0.1 } },
    ],
  },
  cable: {
    predictions: [
      { measurand: "force-a", tolerance: { family: "interval", lower: 5, upper: 7 } },
      { measurand: "force-b", expected: 6 },
      { measurand: "dust-quay", tolerance: { family: "interval", lower: 5, upper: 15 } },
    ],
  },
  measurements: [
    ...[7.6, 7.9, 8.4, 7.2].map((value, index) => ({
      id: `force:a${index}`,
      measurand: "force-a",
      batch: index < 2 ? "n1" : "n2",
      value,
      sd: 0.3,
      shared: [
        { error: "offset-load" },
        { error: "gain-load" },
        { error: "night-load", coefficient: index === 3 ? -1 : 1 },
      ],
    })),
    {
      id: "force:b0",
      measurand: "force-b",
      batch: "n1",
      value: 10.3,
      sd: 0.4,
      shared: [{ error: "offset-load", coefficient: 0.5 }, { error: "night-load" }],
    },
    ...[24, 27, 22].map((value, index) => ({
      id: `dust:${index}`,
      measurand: "dust-quay",
      batch: index === 0 ? "p1" : "p2",
      value,
      sd: 2,
      shared: [{ error: "pump" }],
    })),
  ],
};

/** Measurements that are correlated two by two, in blocks, within a quantity and across two. */
export const correlated: Form = {
  observables: [{ key: "offset", title: "Offset of the deck", unit: "mm", scale: "linear" }],
  measurands: [
    { key: "offset-east", observable: "offset", reference: { family: "normal", mean: 0, sd: 10 } },
    {
      key: "offset-north",
      observable: "offset",
      reference: { family: "uniform", lower: -30, upper: 30 },
    },
  ],
  vortex: {
    predictions: [
      { measurand: "offset-east", expected: 4, tolerance: { family: "normal", sd: 1 } },
      { measurand: "offset-north", expected: -3, tolerance: { family: "normal", sd: 1 } },
    ],
    toleranceCorrelations: [{ a: "offset-east", b: "offset-north", coefficient: -0.4 }],
  },
  cable: {
    predictions: [
      { measurand: "offset-east", expected: 0 },
      { measurand: "offset-north", tolerance: { family: "interval", lower: -2, upper: 2 } },
    ],
  },
  measurements: [
    { id: "offset:e1", measurand: "offset-east", value: 4.4, sd: 0.6 },
    { id: "offset:n1", measurand: "offset-north", value: -3.6, sd: 0.8 },
    { id: "offset:e2", measurand: "offset-east", value: 3.1, sd: 0.5 },
    {
      id: "offset:n2",
      measurand: "offset-north",
      value: -0.25,
      plus: 0.07,
      minus: 0.05,
      unit: "cm",
    },
  ],
  correlations: [
    { a: "offset:e1", b: "offset:n1", coefficient: 0.35 },
    { a: "offset:n1", b: "offset:e2", coefficient: -0.2 },
    { a: "offset:e1", b: "offset:e2", coefficient: 0.5 },
  ],
};

const ratio = { family: "uniform", lower: 0.01, upper: 100 };

/** Derived values: scored in place of their inputs, for a verdict only, and waiting for an input. */
export const derivedValues: Form = {
  observables: [
    { key: "mass", title: "Mass", unit: "kg", scale: "log10" },
    { key: "ratio", title: "Ratio of masses", unit: "1", scale: "log10" },
    { key: "difference", title: "Difference of masses", unit: "kg", scale: "linear" },
  ],
  measurands: ["rail", "deck", "lamp", "cable", "chain"].map((name) => ({
    key: `mass-${name}`,
    observable: "mass",
    reference: { family: "uniform", lower: 0.1, upper: 1e5 },
  })),
  derived: [
    {
      key: "rail-per-deck",
      observable: "ratio",
      title: "Rail to deck",
      expression: "rail / deck",
      from: { rail: "mass-rail", deck: "mass-deck" },
      reference: ratio,
    },
    {
      key: "lamp-per-deck",
      observable: "ratio",
      expression: "lamp / deck",
      from: { lamp: "mass-lamp", deck: "mass-deck" },
      reference: ratio,
    },
    {
      key: "rail-less-lamp",
      observable: "difference",
      expression: "rail - lamp",
      from: { rail: "mass-rail", lamp: "mass-lamp" },
      reference: { family: "normal", mean: 0, sd: 500 },
      scored: false,
    },
    {
      key: "chain-per-cable",
      observable: "ratio",
      expression: "chain / cable",
      from: { chain: "mass-chain", cable: "mass-cable" },
      reference: ratio,
    },
  ],
  sharedErrors: [{ key: "weighbridge", sd: 0.02, relative: true }],
  vortex: {
    predictions: [
      { measurand: "rail-per-deck", expected: 0.1, tolerance: { family: "normal", sd: 0.08 } },
      { measurand: "lamp-per-deck", tolerance: { family: "interval", lower: 0.01, upper: 0.05 } },
      { measurand: "rail-less-lamp", expected: 300, tolerance: { family: "normal", sd: 40 } },
    ],
  },
  cable: {
    predictions: [
      { measurand: "rail-per-deck", expected: 0.2, tolerance: { family: "normal", sd: 0.08 } },
      { measurand: "mass-cable", expected: 800, tolerance: { family: "normal", sd: 0.1 } },
      { measurand: "chain-per-cable", expected: 1.5 },
    ],
  },
  measurements: [
    ...(
      [
        ["rail", 410, 12],
        ["deck", 3800, 150],
        ["lamp", 95, 3],
        ["cable", 760, 20],
      ] as const
    ).map(([name, value, sd]) => ({
      id: `mass:${name}`,
      measurand: `mass-${name}`,
      value,
      sd,
      shared: [{ error: "weighbridge" }],
    })),
    { id: "mass:rail2", measurand: "mass-rail", value: 0.405, sd: 0.01, unit: "t" },
  ],
};
