import type { PayloadInput } from "@weighhouse/campaign/entries";

/**
 * The demo campaign: an invented ice rise, invented teams, invented numbers. Heat reaches the bed
 * of the ice and four teams disagree about where it comes from. The readings were written so that
 * each thing the program shows can be met here: a leader and a close second, failed predictions, a
 * failed decisive one, a hypothesis that is silent on much, one filed after data, a limit, a count, a
 * profile, a reading set aside, one corrected and one withdrawn, disagreeing repeats, shared
 * calibration errors that couple quantities, a sealed prediction that was opened and one that is
 * still sealed, and a quantity that nobody has measured yet (`npm run demo:stream` measures it).
 */
export const demoKey = "aldmark-warm-bed";

export const campaign = {
  key: demoKey,
  title: "Why is the bed of the Aldmark ice rise warm?",
  summary:
    "Radar shows meltwater under ice that should be frozen to its bed. Two boreholes, a line of stakes and a tiltmeter array ask where the heat comes from. An invented campaign: place, teams and numbers are made up.",
  registrationCloses: "2025-03-01T00:00:00Z",
  dataCloses: "2035-01-01T00:00:00Z",
  noneOfThese: { weight: 0.25 },
};

/** The coordinator closes it a little before its time. */
export const registrationClosedAt = "2025-02-28T18:00:00Z";

export const observables: PayloadInput<"observable.declared">[] = [
  { key: "heat-flux", title: "Heat flux at the bed", unit: "mW/m^2", scale: "log10" },
  {
    key: "bed-temperature",
    title: "Bed temperature above pressure melting",
    unit: "K",
    scale: "linear",
  },
  { key: "conductivity", title: "Conductivity of bed water", unit: "S/m", scale: "log10" },
  {
    key: "helium-ratio",
    title: "Helium-3 to helium-4, relative to air",
    unit: "1",
    scale: "log10",
  },
  { key: "sliding-speed", title: "Sliding speed of the ice", unit: "m/yr", scale: "linear" },
  { key: "uplift", title: "Surface uplift", unit: "mm", scale: "linear" },
  { key: "melt-rate", title: "Basal melt rate", unit: "mm/yr", scale: "linear" },
  {
    key: "ice-temperature",
    title: "Ice temperature below that of the bed",
    unit: "K",
    scale: "linear",
    conditions: [{ key: "height", title: "Height above the bed", unit: "m" }],
  },
  { key: "icequakes", title: "Icequakes at the bed", unit: "1", scale: "count" },
];

const within = (from: string, to: string | null) => ({
  from: `${from}T00:00:00Z`,
  to: to === null ? null : `${to}T00:00:00Z`,
});

export const measurands: PayloadInput<"measurand.declared">[] = [
  {
    key: "heat-flux-a",
    observable: "heat-flux",
    title: "Heat flux, borehole A",
    window: within("2025-03-01", "2025-06-01"),
    reference: { family: "uniform", lower: 20, upper: 600 },
  },
  {
    key: "heat-flux-b",
    observable: "heat-flux",
    title: "Heat flux, borehole B",
    window: within("2025-03-01", "2025-06-01"),
    reference: { family: "uniform", lower: 20, upper: 600 },
  },
  {
    key: "bed-temperature-a",
    observable: "bed-temperature",
    title: "Bed temperature, borehole A",
    window: within("2025-03-01", "2025-07-01"),
    reference: { family: "uniform", lower: -4, upper: 0.5 },
  },
  {
    key: "sliding-spring",
    observable: "sliding-speed",
    title: "Sliding speed, spring",
    window: within("2025-03-15", "2025-06-01"),
    reference: { family: "normal", mean: 15, sd: 12 },
    scatter: 0.4,
  },
  {
    key: "conductivity-a",
    observable: "conductivity",
    title: "Water conductivity, borehole A",
    window: within("2025-04-01", "2025-08-01"),
    reference: { family: "uniform", lower: 0.001, upper: 10 },
  },
  {
    key: "helium-a",
    observable: "helium-ratio",
    title: "Helium ratio, borehole A",
    window: within("2025-04-01", "2025-09-01"),
    reference: { family: "uniform", lower: 0.02, upper: 20 },
  },
  {
    key: "ice-profile-a",
    observable: "ice-temperature",
    title: "Ice temperature, borehole A",
    window: within("2025-03-01", "2025-07-01"),
    shape: "curve",
    where: { height: [0, 120] },
    scatter: 0.02,
    reference: { family: "polynomial", in: "height", degree: 1, centre: -2, sd: 2 },
  },
  {
    key: "icequakes-july",
    observable: "icequakes",
    title: "Icequakes, July",
    window: within("2025-07-01", "2025-08-01"),
    reference: { family: "gamma", mean: 20, sd: 20 },
  },
  {
    key: "uplift-b",
    observable: "uplift",
    title: "Uplift at borehole B",
    window: within("2025-05-01", "2025-09-01"),
    reference: { family: "uniform", lower: -60, upper: 60 },
  },
  {
    key: "uplift-summer",
    observable: "uplift",
    title: "Uplift, May to August",
    window: within("2025-05-01", "2025-09-01"),
    reference: { family: "uniform", lower: -60, upper: 60 },
  },
  {
    key: "sliding-autumn",
    observable: "sliding-speed",
    title: "Sliding speed, autumn",
    window: within("2025-08-15", "2025-12-01"),
    reference: { family: "normal", mean: 15, sd: 12 },
    scatter: 0.4,
  },
  {
    key: "melt-rate-a",
    observable: "melt-rate",
    title: "Melt rate, borehole A",
    window: within("2025-09-01", null),
    reference: { family: "uniform", lower: 0, upper: 60 },
    thresholds: [{ key: "drains", title: "Water drains faster than it melts", value: 9 }],
  },
];

export const sharedErrors: PayloadInput<"shared-error.declared">[] = [
  { key: "probe-scale", title: "Heat probe calibration", sd: 0.03 },
  { key: "thermistor-zero", title: "Thermistor zero of a descent", sd: 0.06, per: "batch" },
  { key: "stake-survey", title: "Stake survey datum", sd: 0.5 },
];

export const facilities: PayloadInput<"facility.declared">[] = [
  { key: "borehole-a", title: "Borehole A" },
  { key: "borehole-b", title: "Borehole B" },
  { key: "stake-line", title: "Stake line" },
  { key: "tilt-array", title: "Tiltmeter array" },
  { key: "wet-lab", title: "Wet laboratory" },
];

export const teams: PayloadInput<"team.joined">[] = [
  { key: "deep-heat", title: "Deep Heat" },
  { key: "sliders", title: "Sliders" },
  { key: "brine-group", title: "Brine Group" },
  { key: "relict-water", title: "Relict Water" },
];

const dex = (sd: number) => ({ family: "normal" as const, sd });

type Registration = { at: string; content: PayloadInput<"hypothesis.registered"> };

/** Registered before the first measurement, on the days given. */
export const hypotheses: Registration[] = [
  {
    at: "2025-01-20T10:12:00Z",
    content: {
      key: "hot-spot",
      title: "Geothermal hot spot",
      team: "deep-heat",
      statement:
        "A shallow intrusion under the rise raises the heat flux threefold; the ice above merely melts at its foot. Gases from the mantle reach the bed with the heat.",
      parameters: [
        {
          key: "conducted",
          title: "Heat conducted into the ice",
          unit: "mW/m^2",
          prior: { family: "normal", mean: 75, sd: 8 },
        },
      ],
      predictions: [
        { measurand: "heat-flux-a", expected: 190, tolerance: dex(0.08) },
        { measurand: "heat-flux-b", expected: 120, tolerance: dex(0.1) },
        { measurand: "bed-temperature-a", expected: 0, tolerance: { family: "normal", sd: 0.05 } },
        { measurand: "sliding-spring", expected: 9, tolerance: { family: "normal", sd: 2 } },
        { measurand: "conductivity-a", expected: 0.06, tolerance: dex(0.3) },
        { measurand: "helium-a", expected: 3, tolerance: dex(0.2), decisive: true },
        { measurand: "uplift-summer", expected: 12, tolerance: { family: "normal", sd: 6 } },
        { measurand: "uplift-b", expected: 5, tolerance: { family: "normal", sd: 4 } },
        { measurand: "ice-profile-a", expected: "-conducted * height / 2100" },
        { measurand: "icequakes-july", tolerance: { family: "gamma", mean: 10, sd: 5 } },
        { measurand: "sliding-autumn", expected: 9, tolerance: { family: "normal", sd: 2 } },
        { measurand: "melt-rate-a", expected: 14, tolerance: { family: "normal", sd: 2 } },
      ],
    },
  },
  {
    at: "2025-02-03T15:40:00Z",
    content: {
      key: "friction",
      title: "Heat of sliding",
      team: "sliders",
      statement:
        "The ice slides on till in summer and rests in winter; friction makes the heat, so speed, uplift and heat flux go together, and no gas comes from below.",
      parameters: [
        {
          key: "conducted",
          title: "Heat conducted into the ice",
          unit: "mW/m^2",
          prior: { family: "uniform", lower: 40, upper: 90 },
        },
      ],
      predictions: [
        { measurand: "heat-flux-a", expected: 150, tolerance: dex(0.08) },
        { measurand: "heat-flux-b", expected: 150, tolerance: dex(0.08) },
        { measurand: "bed-temperature-a", expected: 0, tolerance: { family: "normal", sd: 0.1 } },
        { measurand: "sliding-spring", expected: 12, tolerance: { family: "normal", sd: 1.5 } },
        { measurand: "helium-a", expected: 0.9, tolerance: dex(0.1), decisive: true },
        { measurand: "uplift-summer", expected: 15, tolerance: { family: "normal", sd: 5 } },
        {
          measurand: "uplift-b",
          tolerance: { family: "interval", lower: -10, upper: 5 },
        },
        { measurand: "ice-profile-a", expected: "-conducted * height / 2100" },
        { measurand: "icequakes-july", tolerance: { family: "gamma", mean: 45, sd: 15 } },
        { measurand: "sliding-autumn", expected: 14, tolerance: { family: "normal", sd: 1.5 } },
        { measurand: "melt-rate-a", expected: 11, tolerance: { family: "normal", sd: 1.5 } },
      ],
    },
  },
  {
    at: "2025-02-17T08:05:00Z",
    content: {
      key: "brine-seep",
      title: "Brine seeping in",
      team: "brine-group",
      statement:
        "Old sea water seeps along the bed and melts ice below its usual melting point. The bed is colder than pure water allows and its water is salt; of speeds and heat we say nothing.",
      predictions: [
        {
          measurand: "bed-temperature-a",
          expected: -0.12,
          tolerance: { family: "normal", sd: 0.1 },
        },
        { measurand: "conductivity-a", expected: 0.9, tolerance: dex(0.25), decisive: true },
        { measurand: "helium-a", expected: 1, tolerance: dex(0.3) },
      ],
    },
  },
  {
    at: "2025-02-26T21:30:00Z",
    content: {
      key: "relict-lake",
      title: "A relict lake, freezing",
      team: "relict-water",
      statement:
        "The water is left from a warmer age and is freezing on: the bed gives off latent heat, the surface rises as the lake swells, and there is little heat from below.",
      predictions: [
        { measurand: "heat-flux-a", expected: 70, tolerance: dex(0.06) },
        { measurand: "heat-flux-b", expected: 60, tolerance: dex(0.06) },
        { measurand: "bed-temperature-a", expected: 0, tolerance: { family: "normal", sd: 0.02 } },
        { measurand: "sliding-spring", expected: 3, tolerance: { family: "normal", sd: 1 } },
        { measurand: "uplift-summer", expected: 25, tolerance: { family: "normal", sd: 5 } },
        { measurand: "melt-rate-a", expected: 0 },
        { measurand: "icequakes-july", tolerance: { family: "gamma", mean: 3, sd: 3 } },
      ],
    },
  },
];

export type Seal = {
  hypothesis: string;
  at: string;
  /** When it is opened: by its team at that time, or by the clock. */
  until: string;
  prediction: PayloadInput<"hypothesis.registered">["predictions"][number];
};

/** Kept by its team, which opens it when the window has passed. */
export const keptSeal: Seal = {
  hypothesis: "relict-lake",
  at: "2025-02-26T21:45:00Z",
  until: "2025-09-01T00:00:00Z",
  prediction: {
    measurand: "uplift-b",
    expected: 18,
    tolerance: { family: "normal", sd: 6 },
  },
};

/** Held by the server, and sealed for as long as the demo is about. */
export const heldSeal: Seal = {
  hypothesis: "brine-seep",
  at: "2025-02-27T09:20:00Z",
  until: "2034-12-01T00:00:00Z",
  prediction: {
    measurand: "melt-rate-a",
    expected: 12,
    tolerance: { family: "normal", sd: 3 },
  },
};

/** Registered when half of the data were in: marked so, and left out of the standings. */
export const lateHypothesis: Registration = {
  at: "2025-06-10T12:00:00Z",
  content: {
    key: "tidal-pumping",
    title: "Tidal pumping",
    team: "sliders",
    statement: "The ocean tide pumps warm water in and out beneath the rise.",
    predictions: [
      { measurand: "heat-flux-a", expected: 182, tolerance: dex(0.05) },
      { measurand: "sliding-spring", expected: 10.5, tolerance: { family: "normal", sd: 1 } },
    ],
  },
};
