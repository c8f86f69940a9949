import type { Form } from "./form";

/** Every tolerance of a constant on a linear scale, and two that are correlated. */
export const tolerances: Form = {
  observables: [{ key: "slack", title: "Slack of a rope", unit: "cm", scale: "linear" }],
  measurands: ["one", "two", "three", "four", "five", "six", "seven"].map((name) => ({
    key: `slack-${name}`,
    observable: "slack",
    reference: { family: "uniform", lower: 0, upper: 100 },
  })),
  vortex: {
    predictions: [
      { measurand: "slack-one", expected: 20, tolerance: { family: "normal", sd: 3 } },
      {
        measurand: "slack-two",
        expected: 40,
        tolerance: { family: "normal", sd: 0.1, relative: true },
      },
      {
        measurand: "slack-three",
        expected: 50,
        tolerance: { family: "normal", sd: 5, sharing: "each" },
      },
      { measurand: "slack-four", tolerance: { family: "interval", lower: 10, upper: 30 } },
      {
        measurand: "slack-five",
        tolerance: { family: "interval", lower: 55, upper: 75, sharing: "each" },
      },
      {
        measurand: "slack-six",
        expected: 33,
        tolerance: { family: "splitNormal", plus: 9, minus: 3 },
      },
      { measurand: "slack-seven", expected: 12 },
    ],
    toleranceCorrelations: [{ a: "slack-one", b: "slack-two", coefficient: 0.6 }],
  },
  cable: {
    predictions: [
      { measurand: "slack-one", tolerance: { family: "atMost", bound: 15 } },
      { measurand: "slack-two", tolerance: { family: "atLeast", bound: 45, sharing: "each" } },
      { measurand: "slack-three", tolerance: { family: "atMost", bound: 48, sharing: "each" } },
      {
        measurand: "slack-four",
        expected: 25,
        tolerance: { family: "normal", sd: 0.2, relative: true, sharing: "each" },
      },
    ],
  },
  measurements: ["one", "two", "three", "four", "five", "six", "seven"].flatMap((name, index) =>
    [0, 1].map((repeat) => ({
      id: `slack:${name}:${repeat}`,
      measurand: `slack-${name}`,
      value: [21, 43, 47, 22, 64, 36, 12.2][index]! + 1.5 * repeat,
      sd: 1 + 0.5 * repeat,
    })),
  ),
};

/** Parameters under each prior, shared by several predictions, linear and not. */
export const priors: Form = {
  observables: [
    { key: "length", title: "Length", unit: "m", scale: "linear" },
    { key: "damping", title: "Damping", unit: "1/s", scale: "log10" },
  ],
  measurands: [
    {
      key: "length-long",
      observable: "length",
      reference: { family: "uniform", lower: 0, upper: 200 },
    },
    {
      key: "length-short",
      observable: "length",
      reference: { family: "normal", mean: 30, sd: 20 },
    },
    {
      key: "damping-dry",
      observable: "damping",
      reference: { family: "uniform", lower: 0.001, upper: 10 },
    },
    {
      key: "damping-wet",
      observable: "damping",
      reference: { family: "uniform", lower: 0.001, upper: 10 },
    },
  ],
  vortex: {
    parameters: [
      {
        key: "l0",
        title: "Length of a bay",
        unit: "m",
        prior: { family: "normal", mean: 30, sd: 3 },
      },
      { key: "share", prior: { family: "uniform", lower: 0.5, upper: 2 } },
      { key: "d0", unit: "1/s", prior: { family: "lognormal", median: 0.2, sdLog10: 0.3 } },
      { key: "wetness", prior: { family: "loguniform", lower: 1, upper: 10 } },
      { key: "sag", unit: "m", prior: { family: "halfnormal", sd: 2 } },
      { key: "bays", prior: { family: "fixed", value: 3 } },
    ],
    predictions: [
      {
        measurand: "length-long",
        expected: "bays * l0 + sag",
        tolerance: { family: "normal", sd: 2 },
      },
      { measurand: "length-short", expected: "share * l0" },
      {
        measurand: "damping-dry",
        expected: "d0",
        tolerance: { family: "normal", sd: 0.05 },
      },
      {
        measurand: "damping-wet",
        expected: "d0 * wetness",
        tolerance: { family: "normal", sd: 0.05 },
      },
    ],
  },
  cable: {
    parameters: [
      { key: "l0", unit: "m", prior: { family: "normal", mean: 90, sd: 10 } },
      { key: "drag", prior: { family: "normal", mean: -1, sd: 0.4 } },
    ],
    predictions: [
      { measurand: "length-long", expected: "l0" },
      { measurand: "length-short", expected: "l0 / 2 - 10" },
      { measurand: "damping-dry", expected: "10 ^ drag" },
    ],
  },
  measurements: [
    { id: "length:1", measurand: "length-long", value: 95, sd: 2 },
    { id: "length:2", measurand: "length-long", value: 9260, sd: 150, unit: "cm" },
    { id: "length:3", measurand: "length-short", value: 36, sd: 1 },
    { id: "damping:1", measurand: "damping-dry", value: 0.17, sd: 0.02 },
    { id: "damping:2", measurand: "damping-wet", value: 0.61, sd: 0.05 },
    { id: "damping:3", measurand: "damping-wet", value: 0.55, plus: 0.08, minus: 0.06 },
  ],
};

const wind = { key: "wind", unit: "m/s" };

/** Look-ups in tables of one and two axes, and draws from a simulation. */
export const tablesAndEnsembles: Form = {
  observables: [
    {
      key: "hush-depth",
      title: "Depth of the hush",
      unit: "dB",
      scale: "linear",
      conditions: [wind, { key: "rain", unit: "mm/h" }],
    },
    { key: "draught", title: "Draught", unit: "m/s", scale: "log10" },
  ],
  measurands: [
    {
      key: "hush-curve",
      observable: "hush-depth",
      where: { wind: [0, 20], rain: [0, 10] },
      shape: "curve",
      reference: { family: "polynomial", in: "wind", degree: 1, centre: 10, sd: 8, scatter: 2 },
    },
    {
      key: "draught-gap",
      observable: "draught",
      reference: { family: "uniform", lower: 0.1, upper: 30 },
    },
  ],
  vortex: {
    parameters: [{ key: "gain", prior: { family: "normal", mean: 1, sd: 0.1 } }],
    tables: [
      { key: "line", in: ["wind"], at: [[0, 5, 10, 20]], values: [2, 6, 9, 11] },
      {
        key: "plane",
        in: ["wind", "rain"],
        at: [
          [0, 10, 20],
          [0, 10],
        ],
        values: [
          [0, 1],
          [2, 4],
          [3, 7],
        ],
      },
    ],
    ensemble: {
      columns: { gap: [1.2, 1.4, 0.9, 1.1], jet: [3, 2.5, 4, 3.4] },
      weights: [1, 1, 2, 0],
    },
    predictions: [
      {
        measurand: "hush-curve",
        expected: "gain * table(line, wind) + table(plane, wind, rain)",
        tolerance: { family: "normal", sd: 0.5 },
      },
      {
        measurand: "draught-gap",
        expected: "gap * jet",
        tolerance: { family: "normal", sd: 0.05 },
      },
    ],
  },
  cable: {
    tables: [{ key: "step", in: ["wind"], at: [[0, 10, 20]], values: [5, 12, 12] }],
    ensemble: { columns: { drift: [0, 0.5, 1] } },
    predictions: [
      { measurand: "hush-curve", expected: "table(step, wind) + drift" },
      { measurand: "draught-gap", expected: 7 },
    ],
  },
  measurements: [
    ...[
      [2, 0, 3.8],
      [8, 4, 10.1],
      [12, 9, 13.9],
      [18, 1, 14.2],
    ].map(([speed, rain, value], index) => ({
      id: `hush-depth:${index}`,
      measurand: "hush-curve",
      conditions: { wind: speed, rain },
      value,
      sd: 0.6,
    })),
    { id: "draught:1", measurand: "draught-gap", value: 3.7, sd: 0.3 },
  ],
};

/** Enough parameters that none enters linearly for the evidence to need nested sampling. */
export const manyParameters: Form = {
  observables: [
    {
      key: "ring",
      title: "Ringing",
      unit: "1",
      scale: "linear",
      conditions: [{ key: "lag", unit: "s" }],
    },
  ],
  measurands: [
    {
      key: "ring-down",
      observable: "ring",
      where: { lag: [0, 10] },
      shape: "curve",
      reference: { family: "polynomial", in: "lag", degree: 2, centre: 0, sd: 1, scatter: 0.5 },
    },
  ],
  vortex: {
    parameters: [
      { key: "loud", prior: { family: "uniform", lower: 0.5, upper: 2 } },
      { key: "fade", unit: "s", prior: { family: "loguniform", lower: 1, upper: 20 } },
      { key: "turnRate", unit: "1/s", prior: { family: "uniform", lower: 1, upper: 3 } },
      { key: "phase", prior: { family: "uniform", lower: -1, upper: 1 } },
    ],
    predictions: [
      { measurand: "ring-down", expected: "loud * exp(-lag / fade) * cos(turnRate * lag + phase)" },
    ],
  },
  cable: {
    predictions: [
      {
        measurand: "ring-down",
        expected: 0,
        tolerance: { family: "normal", sd: 0.4, sharing: "each" },
      },
    ],
  },
  measurements: Array.from({ length: 15 }, (_, index) => {
    const lag = 0.6 * index;
    const off = 0.05 * (((index * 7) % 5) - 2);
    const value = 1.1 * Math.exp(-lag / 5) * Math.cos(2 * lag + 0.3) + off;
    return {
      id: `ring:${index}`,
      measurand: "ring-down",
      conditions: { lag: Number(lag.toFixed(3)) },
      value: Number(value.toFixed(4)),
      sd: 0.08,
    };
  }),
};
