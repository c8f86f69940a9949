import { describe, expect, test } from "vitest";
import { readCampaign } from "@weighhouse/campaign/read";
import { scoreCampaign } from "./score";

type Part = Record<string, unknown>;

const uniform = { family: "uniform", lower: 0, upper: 10 };
const observables: Part[] = [
  {
    key: "o",
    title: "O",
    unit: "m",
    scale: "linear",
    conditions: [{ key: "depth", unit: "m" }],
  },
  { key: "l", title: "L", unit: "m", scale: "log10" },
  { key: "c", title: "C", unit: "deg", scale: "cyclic", period: 360 },
  { key: "g", title: "G", unit: "mag", scale: "magnitude" },
  { key: "v", title: "V", scale: "event" },
  { key: "n", title: "N", unit: "1", scale: "count" },
];
const x = { key: "x", observable: "o", reference: uniform };
const y = { key: "y", observable: "o", reference: uniform };
const logged = { key: "y", observable: "l", reference: { ...uniform, lower: 1 } };
const curve = { key: "x", observable: "o", shape: "curve", reference: uniform };
const event = { key: "y", observable: "v" };
const count = { key: "y", observable: "n", reference: { family: "gamma", mean: 4, sd: 2 } };

function documentOf({ measurands = [x], prediction, hypothesis, measurement, ...rest }: Part) {
  const predictions = prediction === undefined ? [] : [prediction];
  return {
    format: "weighhouse-campaign/1",
    campaign: { key: "refusals", title: "Refusals" },
    observables,
    measurands,
    sharedErrors: [{ key: "scale", sd: 0.1, relative: true }],
    hypotheses: [{ key: "h", title: "H", predictions, ...(hypothesis as Part | undefined) }],
    measurements: [
      { id: "a", measurand: "x", value: 3, sd: 1, conditions: { depth: 1 } },
      ...(measurement === undefined ? [] : [{ id: "b", ...(measurement as Part) }]),
    ],
    ...rest,
  };
}

/** What isn't supported yet, the part that brings it in, and where it must be found. */
const cases: [string, Part, string[]][] = [
  [
    "a cyclic scale",
    { measurands: [x, { key: "y", observable: "c", reference: null }] },
    ["/observables/2/scale"],
  ],
  [
    "a magnitude scale",
    { measurands: [x, { key: "y", observable: "g", reference: uniform }] },
    ["/observables/3/scale"],
  ],
  [
    "events",
    {
      measurands: [x, event],
      prediction: { measurand: "y", probability: 0.9 },
      measurement: { measurand: "y", occurred: true },
    },
    ["/observables/4/scale", "/hypotheses/0/predictions/0/probability", "/measurements/1/occurred"],
  ],
  [
    "counts",
    {
      measurands: [x, count],
      prediction: { measurand: "y", tolerance: { family: "gamma", mean: 3, sd: 1 } },
      measurement: { measurand: "y", count: 3 },
    },
    [
      "/observables/5/scale",
      "/measurands/1/reference/family",
      "/hypotheses/0/predictions/0/tolerance/family",
      "/measurements/1/count",
    ],
  ],
  ["a curve", { measurands: [curve] }, ["/measurands/0/shape"]],
  [
    "a polynomial reference",
    {
      measurands: [
        {
          ...curve,
          where: { depth: [0, 5] },
          reference: { family: "polynomial", in: "depth", degree: 1, centre: 5, sd: 1 },
        },
      ],
    },
    ["/measurands/0/shape", "/measurands/0/reference/family"],
  ],
  [
    "free parameters",
    {
      hypothesis: { parameters: [{ key: "q", prior: { family: "normal", mean: 3, sd: 1 } }] },
      prediction: { measurand: "x", expected: "q * 2" },
    },
    ["/hypotheses/0/parameters"],
  ],
  [
    "an ensemble",
    {
      hypothesis: { ensemble: { columns: { d: [1, 2, 3] } } },
      prediction: { measurand: "x", expected: "d" },
    },
    ["/hypotheses/0/ensemble"],
  ],
  ...["interval", "splitNormal", "atMost", "atLeast"].map((family): [string, Part, string[]] => {
    const bounds: Record<string, Part> = {
      interval: { tolerance: { family, lower: 1, upper: 2 } },
      splitNormal: { expected: 3, tolerance: { family, plus: 1, minus: 2 } },
      atMost: { tolerance: { family, bound: 4 } },
      atLeast: { tolerance: { family, bound: 4 } },
    };
    const at = "/hypotheses/0/predictions/0/tolerance/family";
    return [`the tolerance ${family}`, { prediction: { measurand: "x", ...bounds[family] } }, [at]];
  }),
  [
    "a smooth tolerance",
    {
      measurands: [curve],
      prediction: {
        measurand: "x",
        expected: 3,
        tolerance: { family: "normal", sd: 1, sharing: "smooth", in: "depth", length: 2 },
      },
    },
    ["/measurands/0/shape", "/hypotheses/0/predictions/0/tolerance/sharing"],
  ],
  [
    "correlated tolerances",
    {
      measurands: [x, y],
      hypothesis: {
        predictions: ["x", "y"].map((measurand) => ({
          measurand,
          expected: 3,
          tolerance: { family: "normal", sd: 1 },
        })),
        toleranceCorrelations: [{ a: "x", b: "y", coefficient: 0.5 }],
      },
    },
    ["/hypotheses/0/toleranceCorrelations"],
  ],
  [
    "a conditional prediction",
    {
      measurands: [x, event],
      prediction: { measurand: "x", expected: 3, given: { measurand: "y", occurred: true } },
    },
    ["/observables/4/scale", "/hypotheses/0/predictions/0/given"],
  ],
  [
    "a derived value, scored or not",
    {
      measurands: [x, y],
      derived: [
        {
          key: "r",
          observable: "o",
          expression: "a / b",
          from: { a: "x", b: "y" },
          reference: uniform,
        },
      ],
    },
    ["/derived/0"],
  ],
  [
    "an asymmetric uncertainty",
    { measurement: { measurand: "x", value: 3, plus: 1, minus: 2 } },
    ["/measurements/1/plus", "/measurements/1/minus"],
  ],
  [
    "an upper limit",
    { measurement: { measurand: "x", limit: "upper", value: 3, confidence: 0.95 } },
    ["/measurements/1/limit"],
  ],
  [
    "a censored reading",
    { measurement: { measurand: "x", limit: "lower", value: 3, sd: 1 } },
    ["/measurements/1/limit"],
  ],
  [
    "linear noise on a log10 scale",
    { measurands: [x, logged], measurement: { measurand: "y", value: -1, sd: 1, noise: "linear" } },
    ["/measurements/1/noise"],
  ],
  [
    "a relative shared error",
    { measurement: { measurand: "x", value: 3, sd: 1, shared: [{ error: "scale" }] } },
    ["/measurements/1/shared/0/error"],
  ],
  [
    "correlated measurements",
    {
      measurement: { measurand: "x", value: 3, sd: 1 },
      correlations: [{ a: "a", b: "b", coefficient: 0.3 }],
    },
    ["/correlations"],
  ],
];

describe("what can't be scored yet is refused by name, at its place", () => {
  test.each(cases)("%s", (_name, part, pointers) => {
    const read = readCampaign(documentOf(part));
    // The document itself must be right: the refusal is the engine's.
    if (!read.ok) throw new Error(JSON.stringify(read.problems));
    const scored = scoreCampaign(read.value);
    if (scored.ok) throw new Error("it was scored");
    expect(scored.problems.map(({ pointer }) => pointer)).toEqual(pointers);
    for (const { code, found, allowed } of scored.problems) {
      expect(code).toBe("not-yet-supported");
      expect(found).toMatch(/^.+ \(not-yet-supported\)$/);
      expect(allowed).toMatch(/in this version$/);
    }
  });

  test("a prediction whose value hangs on names isn't taken for a number", () => {
    const read = readCampaign(documentOf({ measurands: [x] }));
    if (!read.ok) throw new Error("the base document is right");
    const [hypothesis] = read.value.hypotheses;
    const prediction = {
      measurand: "x",
      expected: "q * 2",
      tolerance: null,
      probability: null,
      given: null,
      decisive: false,
      registeredAt: null,
    };
    const scored = scoreCampaign({
      ...read.value,
      hypotheses: [{ ...hypothesis!, predictions: [prediction] }],
    });
    const problems = scored.ok ? [] : scored.problems;
    expect(problems.map(({ pointer, code }) => [pointer, code])).toEqual([
      ["/hypotheses/0/predictions/0/expected", "bad-expression"],
    ]);
  });

  test("parts that nothing scored touches are let through", () => {
    const read = readCampaign(
      documentOf({
        measurands: [x, { ...y, closed: { reason: "the site was lost" } }],
        measurement: {
          measurand: "x",
          limit: "upper",
          value: 3,
          confidence: 0.95,
          setAside: { reason: "a limit" },
        },
      }),
    );
    if (!read.ok) throw new Error(JSON.stringify(read.problems));
    const closed = { ...read.value.measurements[1]!, id: "c", measurand: "y", setAside: null };
    const document = { ...read.value, measurements: [...read.value.measurements, closed] };
    const scored = scoreCampaign(document);
    expect(scored.ok && scored.value.measurements).toEqual({ counted: 1, setAside: 1 });
  });
});
