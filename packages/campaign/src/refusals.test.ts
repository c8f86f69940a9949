import { describe, expect, test } from "vitest";
import { problemLine } from "./problem";
import { problemsAfter } from "./testing/documents";
import type { Open } from "./testing/documents";

/**
 * Everything that statistics calls refused and that can be told without scoring, each with its
 * pointer and its words: the rule, the change to a right document, and the lines that it gives.
 */
type Case = [rule: string, change: (document: Open) => void, lines: string[]];

function check(cases: Case[]): void {
  test.each(cases)("%s", (_rule, change, lines) => {
    expect(problemsAfter(change).map(problemLine)).toEqual(lines);
  });
}

const add = (measurement: Open) => (document: Open) =>
  document.measurements.push({ id: "new", ...measurement });
const NEW = "/measurements/15";

describe("uncertainties and sizes out of range", () => {
  const range = "found {}; allowed a number above 0";
  const line = (field: string, value: string, allowed = range) =>
    `${NEW}/${field}: ${allowed.replace("{}", value)}`;
  const crest = { measurand: "pitch-crest" };
  check([
    ["sd of zero", add({ ...crest, value: 80, sd: 0 }), [line("sd", "0")]],
    ["sd below zero", add({ ...crest, value: 80, sd: -1 }), [line("sd", "-1")]],
    ["plus of zero", add({ ...crest, value: 80, plus: 0, minus: 1 }), [line("plus", "0")]],
    ["minus below zero", add({ ...crest, value: 80, plus: 1, minus: -1 }), [line("minus", "-1")]],
    [
      "confidence of one half",
      add({ ...crest, limit: "upper", value: 80, confidence: 0.5 }),
      [`${NEW}/confidence: found 0.5; allowed a number above 0.5 and below 1`],
    ],
    [
      "confidence of one",
      add({ ...crest, limit: "upper", value: 80, confidence: 1 }),
      [`${NEW}/confidence: found 1; allowed a number above 0.5 and below 1`],
    ],
    ["no sigmas", add({ ...crest, limit: "upper", value: 80, sigmas: 0 }), [line("sigmas", "0")]],
    [
      "no exposure",
      add({ measurand: "booms-april", count: 1, exposure: 0 }),
      [line("exposure", "0")],
    ],
    [
      "a background below zero",
      add({ measurand: "booms-april", count: 1, background: -1 }),
      [`${NEW}/background: found -1; allowed a number at least 0`],
    ],
    [
      "a count below zero",
      add({ measurand: "booms-april", count: -1 }),
      [`${NEW}/count: found -1; allowed a whole number at least 0`],
    ],
    [
      "a broken count",
      add({ measurand: "booms-april", count: 1.5 }),
      [`${NEW}/count: found 1.5; allowed a whole number at least 0`],
    ],
    [
      "an efficiency above one",
      add({ measurand: "slide-april", occurred: true, efficiency: 1.1 }),
      [`${NEW}/efficiency: found 1.1; allowed a number at least 0 and at most 1`],
    ],
    [
      "a false alarm below zero",
      add({ measurand: "slide-april", occurred: true, falseAlarm: -0.1 }),
      [`${NEW}/falseAlarm: found -0.1; allowed a number at least 0 and at most 1`],
    ],
    [
      "a number that JSON can't hold",
      add({ ...crest, value: Infinity, sd: 1 }),
      [`${NEW}/value: found Infinity; allowed a number`],
    ],
    [
      "a shared error of zero",
      (document) => (document.sharedErrors[0].sd = 0),
      ["/sharedErrors/0/sd: found 0; allowed a number above 0"],
    ],
    [
      "scatter below zero",
      (document) => (document.measurands[1].scatter = -1),
      ["/measurands/1/scatter: found -1; allowed a number at least 0"],
    ],
    [
      "a weight of zero",
      (document) => (document.hypotheses[0].weight = 0),
      ["/hypotheses/0/weight: found 0; allowed a number above 0"],
    ],
    [
      "a rule that passes and fails at once",
      (document) => (document.campaign.rule = { pass: 0.6, fail: 0.7 }),
      ["/campaign/rule/fail: found 0.7; allowed below 0.6"],
    ],
  ]);
});

describe("a result of exactly one form, with what the form needs", () => {
  const crest = { measurand: "pitch-crest" };
  check([
    [
      "no result",
      add(crest),
      [`${NEW}: found no result; allowed one of value, limit with value, occurred, count`],
    ],
    [
      "two results",
      add({ ...crest, value: 80, sd: 1, occurred: true }),
      [
        `${NEW}: found value and occurred; allowed exactly one of value, limit with value, occurred, count`,
      ],
    ],
    [
      "a value without an uncertainty",
      add({ ...crest, value: 80 }),
      [
        `${NEW}/sd: found nothing; allowed a number above 0; or plus and minus; only one that is set aside needs none`,
      ],
    ],
    [
      "sd beside plus and minus",
      add({ ...crest, value: 80, sd: 1, plus: 1, minus: 1 }),
      [`${NEW}: found sd and plus and minus; allowed sd (or sdDex), or plus and minus`],
    ],
    [
      "plus without minus",
      add({ ...crest, value: 80, plus: 1 }),
      [`${NEW}/minus: found nothing, beside plus; allowed a number above 0`],
    ],
    [
      "a limit without its value",
      add({ ...crest, limit: "upper", sd: 1 }),
      [`${NEW}/value: found nothing; allowed the limit's value`],
    ],
    [
      "a limit without its meaning",
      add({ ...crest, limit: "upper", value: 100 }),
      [
        `${NEW}/limit: found a limit without any of them; allowed a limit with one of confidence, sigmas and sd`,
      ],
    ],
    [
      "a limit with two meanings",
      add({ ...crest, limit: "upper", value: 100, sd: 1, sigmas: 3 }),
      [`${NEW}: found sigmas and sd; allowed one of confidence, sigmas and sd`],
    ],
    [
      "fields of another form",
      add({ ...crest, value: 80, sd: 1, sigmas: 3, exposure: 2 }),
      [
        `${NEW}/sigmas: found sigmas beside value; allowed with value: value, sd, sdDex, plus, minus, noise`,
        `${NEW}/exposure: found exposure beside value; allowed with value: value, sd, sdDex, plus, minus, noise`,
      ],
    ],
    [
      "an event's form on a linear scale",
      add({ ...crest, occurred: true }),
      [`${NEW}/occurred: found occurred; allowed value or limit on the scale linear`],
    ],
    [
      "a value of an event",
      add({ measurand: "slide-april", value: 1, sd: 1 }),
      [`${NEW}/value: found value; allowed occurred on the scale event`],
    ],
    [
      "a limit on a circle",
      add({ measurand: "ripple-crest", limit: "upper", value: 1, sd: 1 }),
      [`${NEW}/limit: found limit; allowed value on the scale cyclic`],
    ],
    [
      "dex on a linear scale",
      add({ ...crest, value: 80, sdDex: 0.1 }),
      [`${NEW}/sdDex: found sdDex on the scale linear; allowed sd; sdDex is for the scale log10`],
    ],
    [
      "dex beside sd",
      add({ measurand: "grain-foot", value: 0.3, sdDex: 0.1, sd: 0.1 }),
      [`${NEW}/sdDex: found sdDex beside sd; allowed one of the two`],
    ],
    [
      "linear noise on a linear scale",
      add({ ...crest, value: 80, sd: 1, noise: "linear" }),
      [`${NEW}/noise: found linear noise on the scale linear; allowed it on the scale log10 only`],
    ],
    [
      "linear noise with plus and minus",
      add({ measurand: "grain-foot", value: 0.3, plus: 0.1, minus: 0.1, noise: "linear" }),
      [`${NEW}/plus: found plus and minus with linear noise; allowed sd`],
    ],
    [
      "linear noise in dex",
      add({ measurand: "grain-foot", value: 0.3, sdDex: 0.1, noise: "linear" }),
      [`${NEW}/sdDex: found sdDex with linear noise; allowed sd`],
    ],
    [
      "a lower limit with confidence",
      add({ ...crest, limit: "lower", value: 80, confidence: 0.95 }),
      [
        `${NEW}/confidence: found lower with confidence; allowed lower with sd; confidence says that the quantity was compatible with zero`,
      ],
    ],
    [
      "a brighter limit with sigmas",
      add({ measurand: "shimmer-noon", limit: "brighter", value: 18, sigmas: 3 }),
      [
        `${NEW}/sigmas: found brighter with sigmas; allowed brighter with sd; sigmas says that the quantity was compatible with zero`,
      ],
    ],
    [
      "an upper limit on magnitudes",
      add({ measurand: "shimmer-noon", limit: "upper", value: 18, sd: 1 }),
      [`${NEW}/limit: found upper; allowed fainter or brighter on the scale magnitude`],
    ],
    [
      "confidence on log10 without linear noise",
      add({ measurand: "grain-foot", limit: "upper", value: 0.3, confidence: 0.9 }),
      [
        `${NEW}/confidence: found confidence on the scale log10; allowed sd or sdDex; or noise "linear", since zero has no logarithm`,
      ],
    ],
    [
      "a limit with sd and linear noise",
      add({ measurand: "grain-foot", limit: "upper", value: 0.3, sd: 0.1, noise: "linear" }),
      [`${NEW}/sd: found a limit with sd and linear noise; allowed confidence or sigmas`],
    ],
  ]);
});

describe("values that have no logarithm", () => {
  const words = 'allowed a number above 0 on the scale log10; or noise "linear" with sd';
  check([
    [
      "a value of zero",
      add({ measurand: "grain-foot", value: 0, sd: 1 }),
      [`${NEW}/value: found 0; ${words}`],
    ],
    [
      "a value below zero in another unit",
      add({ measurand: "grain-foot", value: -3, sd: 1, unit: "um" }),
      [`${NEW}/value: found -3; ${words}`],
    ],
    [
      "minus as large as the value",
      add({ measurand: "grain-foot", value: 0.3, plus: 0.1, minus: 0.3 }),
      [`${NEW}/minus: found 0.3; allowed a number below the value 0.3 on the scale log10`],
    ],
    [
      "a limit below zero of what was compatible with zero",
      add({ measurand: "pitch-crest", limit: "upper", value: -1, sigmas: 3 }),
      [`${NEW}/value: found -1; allowed a limit above 0: the quantity was compatible with zero`],
    ],
    [
      "an expected value",
      (document) => (document.hypotheses[1].predictions[2].expected = 0),
      [
        "/hypotheses/1/predictions/2/expected: found 0; allowed a number above 0 on the scale log10",
      ],
    ],
    [
      "bounds of a tolerance",
      (document) => {
        document.hypotheses[0].predictions[3].tolerance.lower = -0.1;
        document.hypotheses[1].predictions[1].tolerance.bound = 0;
      },
      [
        "/hypotheses/0/predictions/3/tolerance/lower: found -0.1; allowed a number above 0 on the scale log10",
        "/hypotheses/1/predictions/1/tolerance/bound: found 0; allowed a number above 0 on the scale log10",
      ],
    ],
    [
      "a reference and a threshold",
      (document) => {
        document.measurands[2].reference.mean = 0;
        document.measurands[3].reference.lower = 0;
        document.measurands[3].thresholds = [{ key: "none", value: -2 }];
      },
      [
        "/measurands/2/reference/mean: found 0; allowed a number above 0 on the scale log10",
        "/measurands/3/reference/lower: found 0; allowed a number above 0 on the scale log10",
        "/measurands/3/thresholds/0/value: found -2; allowed a number above 0 on the scale log10",
      ],
    ],
  ]);

  test("a temperature below its own zero has a logarithm in kelvin", () => {
    const change = (document: Open) => {
      document.observables[1].unit = "K";
      document.measurements.splice(0, 15, {
        id: "new",
        measurand: "grain-foot",
        value: -10,
        sd: 1,
        unit: "degC",
      });
      document.correlations = [];
    };
    expect(problemsAfter(change)).toEqual([]);
  });
});

describe("units", () => {
  check([
    [
      "of another dimension",
      (document) => (document.measurements[0].unit = "kg"),
      ["/measurements/0/unit: found the unit kg; allowed Hz or a unit of its dimension"],
    ],
    [
      "none on an observable that needs one",
      (document) => delete document.observables[0].unit,
      ["/observables/0/unit: found nothing; allowed a unit; 1 for a bare number"],
    ],
  ]);

  test("a unit that nobody knows is a label, and no error", () => {
    expect(problemsAfter((document) => (document.measurements[0].unit = "wobbles"))).toEqual([]);
  });
});

describe("window and conditions", () => {
  const curve = {
    measurand: "pitch-curve",
    value: 80,
    sd: 1,
    conditions: { slope: 30, day: 1, humidity: 20 },
  };
  const window = "2031-03-01T00:00:00Z to 2031-06-01T00:00:00Z, the window of pitch-crest";
  const at = (observedAt: string) =>
    add({ measurand: "pitch-crest", value: 80, sd: 1, observedAt });
  check([
    ["on the window's first instant", at("2031-03-01T00:00:00.000Z"), []],
    ["on the window's last instant", at("2031-06-01T00:00:00Z"), []],
    [
      "a microsecond before the window",
      at("2031-02-28T23:59:59.999999Z"),
      [
        `${NEW}/observedAt: found 2031-02-28T23:59:59.999999Z; allowed from ${window}`,
        `${NEW}/observedAt: found 2031-02-28T23:59:59.999999Z; allowed a time from 2031-03-01T00:00:00Z to 2031-06-01T00:00:00Z, the table of humidity`,
      ],
    ],
    [
      "on a condition's ends",
      add({ ...curve, conditions: { ...curve.conditions, slope: 40 } }),
      [],
    ],
    [
      "outside a condition's range",
      add({ ...curve, conditions: { ...curve.conditions, slope: 40.1 } }),
      [`${NEW}/conditions/slope: found 40.1; allowed 20 to 40, the range of pitch-curve`],
    ],
    [
      "a constant's measurement too",
      add({ measurand: "pitch-crest", value: 80, sd: 1, conditions: { slope: 10 } }),
      [`${NEW}/conditions/slope: found 10; allowed 25 to 35, the range of pitch-crest`],
    ],
    [
      "a condition that the observable doesn't have",
      add({ ...curve, conditions: { ...curve.conditions, wind: 3 } }),
      [`${NEW}/conditions/wind: found the unknown condition wind; allowed slope, day, humidity`],
    ],
    [
      "any condition of an observable without",
      add({ measurand: "grain-foot", value: 0.3, sd: 0.1, conditions: { wind: 3 } }),
      [
        `${NEW}/conditions/wind: found the unknown condition wind; allowed no condition: none is declared`,
      ],
    ],
    [
      "a curve's measurement that lacks what predictions and reference use",
      add({ measurand: "pitch-curve", value: 80, sd: 1 }),
      [
        `${NEW}/conditions: found no slope; allowed a value of slope: the polynomial reference uses it`,
        `${NEW}/conditions: found no day; allowed a value of day: the prediction of slip-layer uses it`,
      ],
    ],
    [
      "nothing is lacking where it is set aside",
      add({ measurand: "pitch-curve", value: 80, sd: 1, setAside: { reason: "no slope noted" } }),
      [],
    ],
    [
      "a condition from time that contradicts the one given",
      (document) => (document.measurements[0].conditions.day = 11),
      [
        "/measurements/0/conditions/day: found 11; allowed 10.5, computed from observedAt; or leave it out",
      ],
    ],
    ["one that agrees", (document) => (document.measurements[0].conditions.day = 10.5), []],
    [
      "a window that ends before it begins",
      (document) => (document.measurands[0].window.to = "2031-02-01T00:00:00Z"),
      [
        "/measurands/0/window/to: found 2031-02-01T00:00:00Z; allowed a time not before 2031-03-01T00:00:00Z",
        "/measurements/0/observedAt: found 2031-03-11T12:00:00Z; allowed from 2031-03-01T00:00:00Z to 2031-02-01T00:00:00Z, the window of pitch-curve",
      ],
    ],
    [
      "a range the wrong way round",
      (document) => (document.measurands[1].where.slope = [35, 25]),
      ["/measurands/1/where/slope: found 35 to 25; allowed a lower end not above the upper"],
    ],
    [
      "a range of an unknown condition",
      (document) => (document.measurands[1].where = { wind: [0, 1] }),
      ["/measurands/1/where/wind: found the unknown condition wind; allowed slope, day, humidity"],
    ],
  ]);
});

describe("keys", () => {
  check([
    [
      "an unknown measurand",
      add({ measurand: "grain", value: 1, sd: 1 }),
      [
        `${NEW}/measurand: found the unknown measurand grain; allowed pitch-curve, pitch-crest, grain-crest, grain-foot, ripple-crest, shimmer-noon, slide-april, booms-april`,
      ],
    ],
    [
      "a measurement of what is computed",
      add({ measurand: "grain-ratio", value: 1, sd: 1 }),
      [
        `${NEW}/measurand: found the derived value grain-ratio; allowed a measurand: derived values are computed`,
      ],
    ],
    [
      "an unknown facility, team and shared error",
      (document) =>
        Object.assign(document.measurements[0], {
          facility: "west",
          team: "x",
          shared: [{ error: "drift" }],
        }),
      [
        "/measurements/0/facility: found the unknown facility west; allowed north-mast, south-mast",
        "/measurements/0/team: found the unknown team x; allowed slip, echo",
        "/measurements/0/shared/0/error: found the unknown shared error drift; allowed tuning, night-zero",
      ],
    ],
    [
      "an unknown observable",
      (document) => (document.measurands[4].observable = "x"),
      [
        "/measurands/4/observable: found the unknown observable x; allowed pitch, grain, ripple, shimmer, slide, booms",
      ],
    ],
    [
      "unknown keys of a hypothesis",
      (document) => {
        document.hypotheses[1].team = "x";
        document.hypotheses[1].withheld = ["y"];
        document.hypotheses[1].predictions[4].measurand = "z";
        document.hypotheses[0].predictions[7].given.measurand = "w";
        document.hypotheses[0].toleranceCorrelations[0].b = "v";
      },
      [
        "/hypotheses/0/predictions/7/given/measurand: found the unknown measurand w; allowed pitch-curve, pitch-crest, grain-crest, grain-foot, ripple-crest, shimmer-noon, slide-april, booms-april",
        "/hypotheses/0/toleranceCorrelations/0/b: found the unknown prediction v; allowed pitch-curve, pitch-crest, grain-crest, grain-foot, ripple-crest, shimmer-noon, slide-april, booms-april",
        "/hypotheses/1/team: found the unknown team x; allowed slip, echo",
        "/hypotheses/1/withheld/0: found the unknown measurand y; allowed pitch-curve, pitch-crest, grain-crest, grain-foot, ripple-crest, shimmer-noon, slide-april, booms-april, grain-ratio",
        "/hypotheses/1/predictions/4/measurand: found the unknown measurand z; allowed pitch-curve, pitch-crest, grain-crest, grain-foot, ripple-crest, shimmer-noon, slide-april, booms-april, grain-ratio",
      ],
    ],
    [
      "an unknown measurement in a correlation",
      (document) => (document.correlations[0].b = "nobody:1"),
      [
        "/correlations/0/b: found the unknown measurement nobody:1; allowed the id of a measurement",
      ],
    ],
    [
      "an unknown replacement of a closed measurand",
      (document) => (document.measurands[4].closed = { reason: "twice", replacedBy: "x" }),
      [
        "/measurands/4/closed/replacedBy: found the unknown measurand x; allowed pitch-curve, pitch-crest, grain-crest, grain-foot, ripple-crest, shimmer-noon, slide-april, booms-april",
      ],
    ],
    [
      "an id twice",
      add({ id: "south:1", measurand: "pitch-crest", value: 80, sd: 1 }),
      [`${NEW}/id: found the id south:1 a second time; allowed each id once`],
    ],
    [
      "a key twice in every list",
      (document) => {
        document.observables[4].key = "booms";
        document.measurands[7].observable = "pitch";
        document.measurands.splice(6, 2);
        document.measurements.splice(12, 2);
        for (const { predictions } of document.hypotheses) {
          predictions.splice(
            0,
            9,
            ...predictions.filter(({ measurand }: Open) => !/april/.test(measurand)),
          );
        }
        document.facilities[1].key = "north-mast";
        document.teams.push({ key: "slip" });
        document.sharedErrors.push({ key: "tuning", sd: 1 });
        document.hypotheses[1].key = "slip-layer";
        document.derived[0].key = "grain-foot";
        document.hypotheses[1].predictions.splice(2, 1);
      },
      [
        "/observables/5/key: found the observable booms a second time; allowed each key once",
        "/derived/0/key: found the measurand or derived value grain-foot a second time; allowed each key once",
        "/sharedErrors/2/key: found the shared error tuning a second time; allowed each key once",
        "/facilities/1/key: found the facility north-mast a second time; allowed each key once",
        "/teams/2/key: found the team slip a second time; allowed each key once",
        "/hypotheses/1/key: found the hypothesis slip-layer a second time; allowed each key once",
      ],
    ],
    [
      "a key twice inside a part",
      (document) => {
        document.observables[0].conditions.push({ key: "slope" });
        document.measurands[1].thresholds.push({ key: "audible", value: 30 });
        document.hypotheses[0].parameters.push({ key: "f0", prior: { family: "fixed", value: 1 } });
        document.hypotheses[0].tables[1].key = "d";
        document.hypotheses[0].predictions[0].expected = "f0";
        document.measurements[0].shared.push({ error: "tuning" });
      },
      [
        "/observables/0/conditions/3/key: found the condition slope a second time; allowed each key once",
        "/measurands/1/thresholds/1/key: found the threshold audible a second time; allowed each key once",
        "/hypotheses/0/parameters/6/key: found the parameter f0 a second time; allowed each key once",
        "/hypotheses/0/tables/1/key: found the name d a second time; allowed each key once",
        "/measurements/0/shared/2/error: found the shared error tuning a second time; allowed each key once",
      ],
    ],
    [
      "keys of the wrong form",
      (document) => {
        document.facilities[1].key = "South Mast";
        document.hypotheses[0].parameters[1].key = "N";
        document.hypotheses[0].predictions[0].expected = "f0";
      },
      [
        '/facilities/1/key: found "South Mast"; allowed a key: 1 to 64 of a-z, 0-9 and -, starting with a letter or digit',
        '/hypotheses/0/parameters/1/key: found "N"; allowed a name for expressions: a small letter, then up to 31 of a-z, A-Z, 0-9 and _',
      ],
    ],
    [
      "a time with an offset, and one that no calendar has",
      (document) => {
        document.campaign.dataCloses = "2031-06-01T00:00:00+02:00";
        document.campaign.registrationCloses = "2031-02-29T00:00:00Z";
      },
      [
        '/campaign/registrationCloses: found "2031-02-29T00:00:00Z"; allowed an RFC 3339 time in UTC, such as 2031-03-01T00:00:00Z',
        '/campaign/dataCloses: found "2031-06-01T00:00:00+02:00"; allowed an RFC 3339 time in UTC, such as 2031-03-01T00:00:00Z',
      ],
    ],
    [
      "a member's name that is none, in records",
      (document) => {
        document.measurements[0].conditions["Slope!"] = 3;
        document.derived[0].from["Crest"] = "grain-crest";
      },
      [
        '/derived/0/from: found the member "Crest"; allowed as a member\'s name a name for expressions: a small letter, then up to 31 of a-z, A-Z, 0-9 and _',
        '/measurements/0/conditions: found the member "Slope!"; allowed as a member\'s name a name for expressions: a small letter, then up to 31 of a-z, A-Z, 0-9 and _',
      ],
    ],
  ]);
});
