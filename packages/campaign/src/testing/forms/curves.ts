import { SPRING } from "./form";
import type { Form } from "./form";

const conditions = [
  { key: "wind", title: "Speed of the wind", unit: "m/s" },
  { key: "day", title: "Day", unit: "d", time: { epoch: "2034-03-01T00:00:00Z" } },
  {
    key: "level",
    title: "Level of the river",
    unit: "m",
    time: {
      table: [
        ["2034-03-01T00:00:00Z", 4.1],
        ["2034-04-01T00:00:00Z", 3.8],
        ["2034-06-01T00:00:00Z", 3.2],
      ],
    },
  },
];

/** Readings of a line a + b wind, off it by fixed amounts. */
function alongWind(
  prefix: string,
  measurand: string,
  { from, slope, sd }: { from: number; slope: number; sd: number },
) {
  const off = [0.4, -0.9, 0.1, 1.2, -0.6, 0.3, -0.2, 0.8];
  return off.map((by, index) => {
    const wind = 4 + 2 * index;
    return {
      id: `${prefix}:${index + 1}`,
      measurand,
      observedAt: `2034-03-${String(5 + 3 * index).padStart(2, "0")}T12:00:00Z`,
      conditions: { wind },
      value: Number((from + slope * wind + by * sd).toFixed(6)),
      sd,
    };
  });
}

/** Curves under a polynomial reference, along conditions that are given and computed from time. */
export const polynomialCurves: Form = {
  observables: [
    { key: "pitch", title: "Pitch of the hum", unit: "Hz", scale: "linear", conditions },
    { key: "sway", title: "Sway", unit: "mm", scale: "log10", conditions },
  ],
  measurands: [
    {
      key: "pitch-wind",
      observable: "pitch",
      window: SPRING,
      where: { wind: [2, 20] },
      shape: "curve",
      reference: { family: "polynomial", in: "wind", degree: 2, centre: 90, sd: 30, scatter: 3 },
    },
    {
      key: "sway-days",
      observable: "sway",
      where: { day: [0, 90], level: [3, 5] },
      shape: "curve",
      scatter: 0.02,
      reference: { family: "polynomial", in: "day", degree: 1, centre: 5, sd: 0.5, scatter: 0.1 },
    },
  ],
  vortex: {
    parameters: [
      { key: "strouhal", prior: { family: "normal", mean: 5, sd: 1 } },
      { key: "offset", unit: "Hz", prior: { family: "normal", mean: 30, sd: 10 } },
      { key: "decay", prior: { family: "normal", mean: 0.004, sd: 0.002 } },
    ],
    predictions: [
      {
        measurand: "pitch-wind",
        expected: "offset + strouhal * wind",
        tolerance: { family: "normal", sd: 2 },
      },
      {
        measurand: "sway-days",
        expected: "10 ^ (0.8 - decay * day) * (level / 4) ^ 0.5",
        tolerance: { family: "normal", sd: 0.05, sharing: "each" },
      },
    ],
  },
  cable: {
    predictions: [
      {
        measurand: "pitch-wind",
        expected: "wind < 9 ? 70 : 110",
        tolerance: { family: "normal", sd: 6, sharing: "each" },
      },
      { measurand: "sway-days", expected: "5 * level / 4" },
    ],
  },
  measurements: [
    ...alongWind("pitch", "pitch-wind", { from: 28, slope: 5.2, sd: 1.5 }),
    {
      id: "sway:1",
      measurand: "sway-days",
      observedAt: "2034-03-06T00:00:00Z",
      value: 6.4,
      sd: 0.5,
    },
    {
      id: "sway:2",
      measurand: "sway-days",
      observedAt: "2034-04-01T00:00:00Z",
      value: 4.6,
      sd: 0.4,
    },
    {
      id: "sway:3",
      measurand: "sway-days",
      observedAt: "2034-05-20T12:00:00Z",
      conditions: { day: 80.5 },
      value: 2.9,
      plus: 0.4,
      minus: 0.3,
    },
  ],
};

/** Tolerances that are smooth along a condition. */
export const smoothCurves: Form = {
  observables: [
    { key: "tension", title: "Tension", unit: "kN", scale: "linear", conditions },
    { key: "echo", title: "Echo", unit: "1", scale: "log10", conditions: [conditions[0]] },
  ],
  measurands: [
    {
      key: "tension-wind",
      observable: "tension",
      where: { wind: [2, 20] },
      shape: "curve",
      reference: { family: "polynomial", in: "wind", degree: 3, centre: 300, sd: 40, scatter: 5 },
    },
    {
      key: "echo-wind",
      observable: "echo",
      shape: "curve",
      reference: { family: "uniform", lower: 0.1, upper: 100, scatter: 0.3 },
    },
  ],
  sharedErrors: [{ key: "gauge", title: "The gauge's zero", sd: 4 }],
  vortex: {
    parameters: [{ key: "pull", unit: "kN", prior: { family: "normal", mean: 300, sd: 20 } }],
    predictions: [
      {
        measurand: "tension-wind",
        expected: "pull + 2 * wind",
        tolerance: { family: "normal", sd: 6, sharing: "smooth", in: "wind", length: 3 },
      },
      {
        measurand: "echo-wind",
        expected: "3 * exp(-wind / 30)",
        tolerance: { family: "normal", sd: 0.1, sharing: "smooth", in: "wind", length: 4 },
      },
    ],
  },
  cable: {
    predictions: [
      {
        measurand: "tension-wind",
        expected: "280 + wind ^ 2 / 4",
        tolerance: {
          family: "normal",
          sd: 0.05,
          relative: true,
          sharing: "smooth",
          in: "wind",
          length: 10,
        },
      },
    ],
  },
  measurements: [
    ...alongWind("tension", "tension-wind", { from: 296, slope: 2.4, sd: 3 }).map((one) => ({
      ...one,
      shared: [{ error: "gauge" }],
    })),
    ...alongWind("echo", "echo-wind", { from: 2.9, slope: -0.06, sd: 0.15 }),
  ],
};

/** Curves whose reference is one common level; conditions that no prediction uses. */
export const levelCurves: Form = {
  observables: [{ key: "warmth", title: "Warmth", unit: "degC", scale: "linear", conditions }],
  measurands: [
    {
      key: "warmth-deck",
      observable: "warmth",
      shape: "curve",
      scatter: 0.3,
      reference: { family: "normal", mean: 8, sd: 6, scatter: 2 },
    },
    {
      key: "warmth-pier",
      observable: "warmth",
      shape: "curve",
      reference: { family: "uniform", lower: -20, upper: 30, scatter: 2 },
    },
  ],
  vortex: {
    predictions: [
      {
        measurand: "warmth-deck",
        expected: "5 + day / 10",
        tolerance: { family: "normal", sd: 1 },
      },
      {
        measurand: "warmth-pier",
        tolerance: { family: "interval", lower: 0, upper: 12, sharing: "each" },
      },
    ],
  },
  cable: {
    predictions: [{ measurand: "warmth-deck", expected: 8 }],
  },
  measurements: [
    {
      id: "warmth:1",
      measurand: "warmth-deck",
      observedAt: "2034-03-11T00:00:00Z",
      value: 6.2,
      sd: 0.5,
    },
    {
      id: "warmth:2",
      measurand: "warmth-deck",
      observedAt: "2034-05-10T00:00:00Z",
      value: 12.4,
      sd: 0.5,
    },
    {
      id: "warmth:3",
      measurand: "warmth-deck",
      conditions: { day: 40 },
      value: 282,
      sd: 0.5,
      unit: "K",
    },
    { id: "warmth:4", measurand: "warmth-pier", value: 7, sd: 1 },
    { id: "warmth:5", measurand: "warmth-pier", value: 9.5, sd: 1 },
  ],
};
