import { SPRING } from "./form";
import type { Form } from "./form";

/** Events: reports that miss and that cry wolf, and a prediction that hangs on one of them. */
export const events: Form = {
  observables: [
    { key: "gust", title: "A gust above 20 m/s", scale: "event" },
    { key: "hush", title: "The bridge falls silent", scale: "event" },
    { key: "after-gust", title: "Loudness after a gust", unit: "dB", scale: "linear" },
  ],
  measurands: [
    { key: "gust-april", observable: "gust", window: SPRING },
    { key: "hush-april", observable: "hush", window: SPRING },
    { key: "hush-may", observable: "hush" },
    {
      key: "loudness-after",
      observable: "after-gust",
      reference: { family: "uniform", lower: 20, upper: 100 },
    },
  ],
  vortex: {
    predictions: [
      { measurand: "gust-april", probability: 0.9 },
      { measurand: "hush-april", probability: 0.15, decisive: true },
      {
        measurand: "loudness-after",
        expected: 62,
        tolerance: { family: "normal", sd: 4 },
        given: { measurand: "gust-april", occurred: true },
      },
    ],
  },
  cable: {
    predictions: [
      { measurand: "gust-april", probability: 0.5 },
      { measurand: "hush-april", probability: 0.8 },
      { measurand: "hush-may", probability: 0.3 },
      {
        measurand: "loudness-after",
        expected: 45,
        tolerance: { family: "normal", sd: 6 },
        given: { measurand: "gust-april", occurred: false },
      },
    ],
  },
  measurements: [
    {
      id: "gust:1",
      measurand: "gust-april",
      occurred: true,
      efficiency: 0.9,
      falseAlarm: 0.02,
      observedAt: "2034-04-11T09:00:00Z",
      postedAt: "2034-04-12T09:00:00Z",
    },
    { id: "gust:2", measurand: "gust-april", occurred: false, efficiency: 0.4, falseAlarm: 0.1 },
    { id: "hush:1", measurand: "hush-april", occurred: false, efficiency: 0.95, falseAlarm: 0.01 },
    { id: "hush:2", measurand: "hush-april", occurred: false },
    { id: "after:1", measurand: "loudness-after", value: 60.5, sd: 1.5 },
  ],
};

/** Counts: exposures, backgrounds, exact rates and spread ones, under each reference. */
export const counts: Form = {
  observables: [
    { key: "knocks", title: "Knocks an hour", unit: "1/h", scale: "count" },
    { key: "swings", title: "Swings a crossing", unit: "1", scale: "count" },
  ],
  measurands: [
    {
      key: "knocks-night",
      observable: "knocks",
      reference: { family: "gamma", mean: 4, sd: 4 },
      thresholds: [{ key: "restless", title: "More than six an hour", value: 6 }],
    },
    {
      key: "knocks-day",
      observable: "knocks",
      reference: { family: "uniform", lower: 0, upper: 30 },
    },
    { key: "swings-truck", observable: "swings", reference: { family: "gamma", mean: 2, sd: 2 } },
  ],
  vortex: {
    parameters: [{ key: "rate", prior: { family: "lognormal", median: 9, sdLog10: 0.1 } }],
    predictions: [
      { measurand: "knocks-night", tolerance: { family: "gamma", mean: 3, sd: 1 } },
      { measurand: "knocks-day", expected: "rate" },
      { measurand: "swings-truck", expected: 0.5 },
    ],
  },
  cable: {
    predictions: [
      { measurand: "knocks-night", tolerance: { family: "gamma", mean: 8, sd: 2 } },
      { measurand: "knocks-day", expected: "4 * 3" },
    ],
  },
  measurements: [
    { id: "knocks:1", measurand: "knocks-night", count: 7, exposure: 2, background: 0.5 },
    { id: "knocks:2", measurand: "knocks-night", count: 0, exposure: 0.25 },
    { id: "knocks:3", measurand: "knocks-night", count: 4 },
    { id: "knocks:4", measurand: "knocks-day", count: 31, exposure: 3, background: 2 },
    { id: "swings:1", measurand: "swings-truck", count: 1, status: "provisional" },
  ],
};
