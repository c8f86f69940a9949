import { describe } from "vitest";
import { NEW, add, check } from "../testing/refusals";

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
      "a curve's measurement that lacks what only a smooth tolerance uses",
      (document) => {
        document.measurands[0].reference = { family: "normal", mean: 80, sd: 20 };
        document.hypotheses[0].predictions[0].expected = "f0";
        add({ measurand: "pitch-curve", value: 80, sd: 1 })(document);
      },
      [
        `${NEW}/conditions: found no slope; allowed a value of slope: the smooth tolerance of slip-layer uses it`,
      ],
    ],
    [
      "a condition that nothing uses may be lacking",
      (document) => {
        document.hypotheses[0].predictions[0].expected = "f0 * slope";
        add({ measurand: "pitch-curve", value: 80, sd: 1, conditions: { slope: 30 } })(document);
      },
      [],
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
