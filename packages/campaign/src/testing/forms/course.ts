import type { Form } from "./form";

/**
 * The course of a campaign: withheld predictions, thresholds, closed measurands, measurements
 * that are set aside, provisional or the same data twice, predictions filed at different times,
 * units that are labels.
 */
export const course: Form = {
  observables: [
    { key: "drone", title: "Drone", unit: "dB", scale: "linear" },
    { key: "murmur", title: "Murmur", unit: "mumbles", scale: "linear" },
  ],
  measurands: [
    {
      key: "drone-march",
      observable: "drone",
      window: { from: "2034-03-01T00:00:00Z", to: "2034-04-01T00:00:00Z" },
      reference: { family: "uniform", lower: 0, upper: 120 },
      thresholds: [
        { key: "annoying", title: "Annoying", value: 45 },
        { key: "harmful", title: "Harmful", value: 85 },
      ],
      firstPostedAt: "2034-03-06T00:00:00Z",
    },
    {
      key: "drone-april",
      observable: "drone",
      reference: { family: "normal", mean: 50, sd: 20 },
      closed: { reason: "the meter fell into the river", replacedBy: "drone-may" },
    },
    { key: "drone-may", observable: "drone", reference: { family: "normal", mean: 50, sd: 20 } },
    { key: "murmur-may", observable: "murmur", reference: { family: "normal", mean: 5, sd: 3 } },
  ],
  vortex: {
    withheld: ["drone-may"],
    predictions: [
      {
        measurand: "drone-march",
        expected: 52,
        tolerance: { family: "normal", sd: 4 },
        decisive: true,
      },
      { measurand: "drone-april", expected: 55, tolerance: { family: "normal", sd: 4 } },
      {
        measurand: "murmur-may",
        expected: 6,
        tolerance: { family: "normal", sd: 1 },
        registeredAt: "2034-05-20T00:00:00Z",
      },
    ],
  },
  cable: {
    predictions: [
      { measurand: "drone-march", expected: 70, tolerance: { family: "normal", sd: 6 } },
      { measurand: "drone-may", expected: 66, tolerance: { family: "normal", sd: 6 } },
      { measurand: "murmur-may", expected: 4, tolerance: { family: "normal", sd: 1 } },
    ],
  },
  measurements: [
    {
      id: "drone:1",
      measurand: "drone-march",
      facility: "quay",
      team: "listeners",
      batch: "n1",
      observedAt: "2034-03-04T11:20:00Z",
      postedAt: "2034-03-06T00:00:00Z",
      knownSince: "2034-03-05T00:00:00Z",
      value: 49.5,
      sd: 1.5,
      source: "notebook 4, page 11",
      extra: { filter: "B", run: 7, windy: false, note: null },
    },
    {
      id: "drone:2",
      measurand: "drone-march",
      facility: "hill",
      value: 53,
      sd: 2,
      status: "provisional",
      sameData: "reel-7",
    },
    { id: "drone:3", measurand: "drone-march", value: 52.5, sd: 2.5, sameData: "reel-7" },
    {
      id: "drone:4",
      measurand: "drone-march",
      value: 47,
      setAside: { reason: "no uncertainty given" },
    },
    { id: "drone:5", measurand: "drone-may", value: 57, sd: 2 },
    {
      id: "murmur:1",
      measurand: "murmur-may",
      observedAt: "2034-05-10T00:00:00Z",
      postedAt: "2034-05-25T00:00:00Z",
      value: 5.6,
      sd: 0.5,
      unit: "mumbles",
    },
    { id: "murmur:2", measurand: "murmur-may", value: 5.1, sd: 0.5, unit: "grumbles" },
  ],
};
