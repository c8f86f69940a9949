/** The demo's measurements: one posting a row of `postings`, at its time, by the facility's observers. */
export type Reading = Record<string, unknown> & {
  id: string;
  measurand: string;
  observedAt: string;
};

const probe = [{ error: "probe-scale" }];
const thermistor = [{ error: "thermistor-zero" }];
const survey = [{ error: "stake-survey" }];

const reading = (
  id: string,
  measurand: string,
  facility: string,
  observedAt: string,
  value: number,
  sd: number | null,
  more: Record<string, unknown> = {},
): Reading => ({
  id,
  measurand,
  facility,
  observedAt: `${observedAt}:00Z`,
  value,
  ...(sd === null ? {} : { sd }),
  ...more,
});

/** A string of thermistors frozen into borehole A, read once: heights above the bed, and readings. */
function profile(values: [height: number, value: number][]): Reading[] {
  return values.map(([height, value]) =>
    reading(`a-string-${height}`, "ice-profile-a", "borehole-a", "2025-03-18T12:00", value, 0.05, {
      conditions: { height },
    }),
  );
}

export const postings: { at: string; readings: Reading[] }[] = [
  {
    at: "2025-03-06T09:00:00Z",
    readings: [
      reading("a-flux-1", "heat-flux-a", "borehole-a", "2025-03-04T11:20", 176, 14, {
        shared: probe,
      }),
      reading("a-flux-2", "heat-flux-a", "borehole-a", "2025-03-05T10:05", 188, 15, {
        shared: probe,
      }),
    ],
  },
  {
    at: "2025-03-12T16:30:00Z",
    readings: [
      reading("a-temp-1", "bed-temperature-a", "borehole-a", "2025-03-11T08:40", -0.05, 0.04, {
        shared: thermistor,
        batch: "descent-1",
      }),
      reading("a-temp-2", "bed-temperature-a", "borehole-a", "2025-03-11T09:10", -0.02, 0.04, {
        shared: thermistor,
        batch: "descent-1",
      }),
      reading("a-temp-3", "bed-temperature-a", "borehole-a", "2025-03-11T09:40", -0.06, 0.04, {
        shared: thermistor,
        batch: "descent-1",
      }),
    ],
  },
  {
    at: "2025-03-19T11:15:00Z",
    readings: profile([
      [8, -0.28],
      [25, -0.86],
      [45, -1.52],
      [70, -2.31],
      [95, -3.2],
      [118, -3.94],
    ]),
  },
  {
    at: "2025-03-27T18:00:00Z",
    readings: [
      reading("b-flux-1", "heat-flux-b", "borehole-b", "2025-03-25T13:00", 118, 12, {
        shared: probe,
      }),
      reading("b-flux-2", "heat-flux-b", "borehole-b", "2025-03-26T13:30", 131, 13, {
        shared: probe,
      }),
    ],
  },
  {
    at: "2025-04-09T07:45:00Z",
    readings: [
      reading("stakes-03", "sliding-spring", "stake-line", "2025-03-31T12:00", 10.9, 0.8, {
        shared: survey,
      }),
      reading("stakes-04a", "sliding-spring", "stake-line", "2025-04-07T12:00", 10.2, 0.8, {
        shared: survey,
      }),
    ],
  },
  {
    at: "2025-04-22T10:10:00Z",
    readings: [
      reading("a-salt-1", "conductivity-a", "wet-lab", "2025-04-14T15:00", 0.11, 0.02),
      reading("a-salt-2", "conductivity-a", "wet-lab", "2025-04-16T15:00", 135, 20, {
        unit: "mS/m",
      }),
    ],
  },
  {
    at: "2025-05-02T12:00:00Z",
    readings: [
      reading("stakes-04b", "sliding-spring", "stake-line", "2025-04-21T12:00", 9.6, 0.8, {
        shared: survey,
      }),
      reading("stakes-05", "sliding-spring", "stake-line", "2025-04-30T12:00", 10.4, 0.7, {
        shared: survey,
      }),
    ],
  },
  {
    at: "2025-05-15T14:20:00Z",
    readings: [
      reading("a-flux-3", "heat-flux-a", "borehole-a", "2025-05-12T10:00", 171, 11, {
        shared: probe,
      }),
      reading("b-flux-3", "heat-flux-b", "borehole-b", "2025-05-13T10:00", 127, 11, {
        shared: probe,
      }),
      reading("a-flux-old", "heat-flux-a", "borehole-a", "2025-05-12T12:00", 240, null, {
        setAside: { reason: "read by eye off a strip chart; no uncertainty given" },
      }),
    ],
  },
  {
    at: "2025-05-28T09:30:00Z",
    readings: [
      reading("a-he-1", "helium-a", "wet-lab", "2025-05-06T09:00", 1.9, 0.3),
      reading("a-he-2", "helium-a", "wet-lab", "2025-05-07T09:00", 2.3, 0.35),
    ],
  },
  {
    at: "2025-06-18T17:00:00Z",
    readings: [
      reading("a-temp-4", "bed-temperature-a", "borehole-a", "2025-06-16T08:30", -0.01, 0.03, {
        shared: thermistor,
        batch: "descent-2",
      }),
      reading("a-temp-5", "bed-temperature-a", "borehole-a", "2025-06-16T09:00", 0.02, 0.03, {
        shared: thermistor,
        batch: "descent-2",
      }),
    ],
  },
  {
    at: "2025-06-30T08:00:00Z",
    readings: [
      reading("tilt-06", "uplift-summer", "tilt-array", "2025-06-28T00:00", 21, 3),
      reading("a-salt-3", "conductivity-a", "wet-lab", "2025-06-25T11:00", 0.092, 0.015),
    ],
  },
  {
    at: "2025-07-21T13:15:00Z",
    readings: [
      reading("a-he-3", "helium-a", "wet-lab", "2025-07-15T09:00", 2.6, 0.3, {
        status: "provisional",
      }),
      reading("tilt-07", "uplift-summer", "tilt-array", "2025-07-19T00:00", 9, 3),
      {
        ...reading("b-tilt", "uplift-b", "tilt-array", "2025-07-19T06:00", 7, null),
        limit: "upper",
        confidence: 0.95,
      },
    ],
  },
  {
    at: "2025-08-02T10:00:00Z",
    readings: [
      {
        id: "quakes-07",
        measurand: "icequakes-july",
        facility: "tilt-array",
        observedAt: "2025-07-31T23:00:00Z",
        count: 45,
        background: 4,
      },
    ],
  },
  {
    at: "2025-08-20T19:00:00Z",
    readings: [
      reading("tilt-08", "uplift-summer", "tilt-array", "2025-08-18T00:00", 14, 3, {
        sameData: "array-2025",
      }),
      reading("tilt-08-satellite", "uplift-summer", "tilt-array", "2025-08-18T06:00", 16, 4, {
        sameData: "array-2025",
      }),
    ],
  },
  {
    at: "2025-09-03T06:50:00Z",
    readings: [
      reading("stakes-08", "sliding-autumn", "stake-line", "2025-08-25T12:00", 10.8, 0.8, {
        shared: survey,
      }),
      reading("stakes-09a", "sliding-autumn", "stake-line", "2025-09-01T12:00", 11.5, 0.8, {
        shared: survey,
      }),
    ],
  },
  {
    at: "2025-09-29T11:00:00Z",
    readings: [
      reading("stakes-09b", "sliding-autumn", "stake-line", "2025-09-22T12:00", 11.1, 0.8, {
        shared: survey,
        status: "provisional",
      }),
    ],
  },
];

/** Filed wrongly, and taken back: its bottle was another's. */
export const withdrawn = {
  at: "2025-05-06T08:10:00Z",
  ids: ["a-salt-2"],
  reason: "the bottle held rinse water of the day before; its label was another's",
};

/** As it was read anew, once the drift of the array was known. */
export const corrected = {
  at: "2025-08-27T16:40:00Z",
  measurement: reading("tilt-07", "uplift-summer", "tilt-array", "2025-07-19T00:00", 12.5, 3),
  reason: "reduced anew with the drift of the array that the August survey showed",
};

/** What `npm run demo:stream` posts, one by one: the melt rate that the campaign still waits for. */
export const streamed = [13.1, 12.4, 14.0, 12.9, 13.6, 12.2, 13.3, 13.9, 12.8, 13.2].map(
  (value, index) => ({
    measurand: "melt-rate-a",
    facility: "borehole-a",
    value: Number((value + 0.1 * index).toFixed(1)),
    sd: 1.2,
    status: "provisional",
  }),
);
