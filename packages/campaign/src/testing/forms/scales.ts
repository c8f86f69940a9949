import type { Form } from "./form";

/** Directions and axes: references with and without, an interval through the period's end. */
export const cyclic: Form = {
  observables: [
    {
      key: "bearing",
      title: "Bearing of the loudest hum",
      unit: "deg",
      scale: "cyclic",
      period: 360,
    },
    { key: "axis", title: "Axis of the sway", unit: "deg", scale: "cyclic", period: 180 },
  ],
  measurands: [
    { key: "bearing-quay", observable: "bearing" },
    {
      key: "bearing-hill",
      observable: "bearing",
      reference: { family: "normal", mean: 350, sd: 40 },
    },
    {
      key: "axis-span",
      observable: "axis",
      scatter: 1.5,
      reference: { family: "uniform", lower: 120, upper: 60 },
    },
    { key: "axis-pier", observable: "axis" },
  ],
  sharedErrors: [{ key: "compass", title: "The compass's zero", sd: 2 }],
  vortex: {
    parameters: [{ key: "turn", unit: "deg", prior: { family: "normal", mean: 4, sd: 3 } }],
    predictions: [
      { measurand: "bearing-quay", expected: 355, tolerance: { family: "normal", sd: 8 } },
      {
        measurand: "bearing-hill",
        expected: "352 + turn",
        tolerance: { family: "normal", sd: 6, sharing: "each" },
      },
      { measurand: "axis-span", tolerance: { family: "interval", lower: 170, upper: 10 } },
      {
        measurand: "axis-pier",
        expected: 2,
        tolerance: { family: "splitNormal", plus: 9, minus: 4 },
      },
    ],
  },
  cable: {
    predictions: [
      { measurand: "bearing-quay", tolerance: { family: "interval", lower: 60, upper: 120 } },
      { measurand: "axis-span", expected: 1 },
    ],
  },
  measurements: [
    {
      id: "bearing:1",
      measurand: "bearing-quay",
      value: 3,
      sd: 4,
      shared: [{ error: "compass" }],
    },
    {
      id: "bearing:2",
      measurand: "bearing-quay",
      value: 357,
      sd: 3,
      shared: [{ error: "compass" }],
    },
    { id: "bearing:3", measurand: "bearing-hill", value: 0.02, sd: 0.05, unit: "rad" },
    { id: "bearing:4", measurand: "bearing-hill", value: 358, sd: 4 },
    { id: "axis:1", measurand: "axis-span", value: 178, plus: 3, minus: 2 },
    { id: "axis:2", measurand: "axis-span", value: 1, sd: 2 },
    { id: "axis:3", measurand: "axis-pier", value: 4, sd: 2 },
  ],
};

/** Magnitudes: readings, fainter and brighter limits of every form. */
export const magnitude: Form = {
  observables: [{ key: "glimmer", title: "Glimmer of the lamps", unit: "mag", scale: "magnitude" }],
  measurands: [
    {
      key: "glimmer-dusk",
      observable: "glimmer",
      reference: { family: "normal", mean: 14, sd: 3 },
    },
    {
      key: "glimmer-night",
      observable: "glimmer",
      reference: { family: "uniform", lower: 10, upper: 24 },
      scatter: 0.05,
    },
    {
      key: "glimmer-dawn",
      observable: "glimmer",
      reference: { family: "uniform", lower: 10, upper: 24, scatter: 0.2 },
    },
  ],
  sharedErrors: [
    { key: "zero-point", title: "Zero point of a night", sd: 0.03, per: "batch" },
    { key: "flat-field", title: "Flat field", sd: 0.02, relative: true },
  ],
  vortex: {
    predictions: [
      { measurand: "glimmer-dusk", expected: 15, tolerance: { family: "normal", sd: 0.3 } },
      { measurand: "glimmer-night", tolerance: { family: "atLeast", bound: 19 } },
      {
        measurand: "glimmer-dawn",
        expected: 17,
        tolerance: { family: "splitNormal", plus: 1, minus: 0.5 },
      },
    ],
  },
  cable: {
    predictions: [
      { measurand: "glimmer-dusk", tolerance: { family: "interval", lower: 13, upper: 14 } },
      { measurand: "glimmer-night", tolerance: { family: "atMost", bound: 18 } },
    ],
  },
  measurements: [
    {
      id: "glimmer:1",
      measurand: "glimmer-dusk",
      batch: "n1",
      value: 14.9,
      sd: 0.05,
      shared: [{ error: "zero-point" }, { error: "flat-field", coefficient: -0.5 }],
    },
    {
      id: "glimmer:2",
      measurand: "glimmer-dusk",
      batch: "n2",
      value: 15.02,
      plus: 0.08,
      minus: 0.05,
      shared: [{ error: "zero-point" }],
    },
    { id: "glimmer:3", measurand: "glimmer-night", limit: "fainter", value: 19.4, sigmas: 5 },
    {
      id: "glimmer:4",
      measurand: "glimmer-night",
      limit: "fainter",
      value: 20.1,
      confidence: 0.95,
    },
    { id: "glimmer:5", measurand: "glimmer-night", limit: "fainter", value: 18.9, sd: 0.2 },
    { id: "glimmer:6", measurand: "glimmer-dawn", limit: "brighter", value: 18.3, sd: 0.1 },
    { id: "glimmer:7", measurand: "glimmer-dawn", value: 17100, sd: 90, unit: "mmag" },
  ],
};

/** Limits on a linear scale: compatible with zero, and censored from either side. */
export const limits: Form = {
  observables: [{ key: "leak", title: "Leak of the damper", unit: "g/h", scale: "linear" }],
  measurands: [
    {
      key: "leak-north",
      observable: "leak",
      reference: { family: "uniform", lower: -5, upper: 60 },
    },
    { key: "leak-south", observable: "leak", reference: { family: "normal", mean: 10, sd: 10 } },
    {
      key: "leak-middle",
      observable: "leak",
      reference: { family: "uniform", lower: 0, upper: 60 },
    },
  ],
  sharedErrors: [{ key: "scale-drift", sd: 0.5 }],
  vortex: {
    predictions: [
      { measurand: "leak-north", expected: 0, tolerance: { family: "normal", sd: 1 } },
      { measurand: "leak-south", tolerance: { family: "interval", lower: 5, upper: 12 } },
      { measurand: "leak-middle", tolerance: { family: "atMost", bound: 20 } },
    ],
  },
  cable: {
    predictions: [
      { measurand: "leak-north", expected: 25, tolerance: { family: "normal", sd: 5 } },
      { measurand: "leak-south", expected: 30 },
      { measurand: "leak-middle", tolerance: { family: "atLeast", bound: 15 } },
    ],
  },
  measurements: [
    { id: "leak:1", measurand: "leak-north", limit: "upper", value: 4, confidence: 0.95 },
    { id: "leak:2", measurand: "leak-north", limit: "upper", value: 6, sigmas: 3 },
    {
      id: "leak:3",
      measurand: "leak-south",
      limit: "upper",
      value: 14,
      sd: 2,
      shared: [{ error: "scale-drift" }],
    },
    {
      id: "leak:4",
      measurand: "leak-south",
      limit: "lower",
      value: 6,
      sd: 1,
      shared: [{ error: "scale-drift" }],
    },
    { id: "leak:5", measurand: "leak-south", value: 9.5, sd: 2 },
    { id: "leak:6", measurand: "leak-middle", limit: "upper", value: 2, sd: 0.3, unit: "mg/s" },
  ],
};

/** A logarithmic scale: dex, asymmetric, noise that is linear, limits of each kind. */
export const logarithmic: Form = {
  observables: [{ key: "power", title: "Power of the hum", unit: "mW", scale: "log10" }],
  measurands: [
    {
      key: "power-deck",
      observable: "power",
      reference: { family: "uniform", lower: 0.01, upper: 1000 },
      scatter: 0.02,
      thresholds: [{ key: "harm", value: 50 }],
    },
    { key: "power-mast", observable: "power", reference: { family: "normal", mean: 3, sd: 1 } },
    {
      key: "power-rope",
      observable: "power",
      reference: { family: "normal", mean: 1, sd: 1, scatter: 0.1 },
    },
  ],
  vortex: {
    predictions: [
      { measurand: "power-deck", expected: 12, tolerance: { family: "normal", sd: 0.15 } },
      {
        measurand: "power-mast",
        expected: 2,
        tolerance: { family: "normal", sd: 0.2, relative: true },
      },
      { measurand: "power-rope", tolerance: { family: "interval", lower: 0.1, upper: 0.9 } },
    ],
  },
  cable: {
    predictions: [
      { measurand: "power-deck", tolerance: { family: "atLeast", bound: 30 } },
      {
        measurand: "power-mast",
        expected: 8,
        tolerance: { family: "splitNormal", plus: 0.3, minus: 0.1 },
      },
    ],
  },
  measurements: [
    { id: "power:1", measurand: "power-deck", value: 13, sd: 2 },
    { id: "power:2", measurand: "power-deck", value: 11, sdDex: 0.06 },
    { id: "power:3", measurand: "power-deck", value: 0.014, plus: 0.004, minus: 0.003, unit: "W" },
    { id: "power:4", measurand: "power-mast", limit: "upper", value: 5, sdDex: 0.1 },
    { id: "power:5", measurand: "power-mast", limit: "lower", value: 1.2, sd: 0.2 },
    { id: "power:6", measurand: "power-rope", value: -0.2, sd: 0.5, noise: "linear" },
    { id: "power:7", measurand: "power-rope", value: 0.7, sd: 0.4, noise: "linear" },
    {
      id: "power:8",
      measurand: "power-rope",
      limit: "upper",
      value: 1.5,
      confidence: 0.95,
      noise: "linear",
    },
    {
      id: "power:9",
      measurand: "power-rope",
      limit: "upper",
      value: 2,
      sigmas: 3,
      noise: "linear",
    },
  ],
};
