import { describe } from "vitest";
import { check, place, predict, slip } from "../testing/refusals";
import type { Case } from "../testing/refusals";

describe("predictions", () => {
  check([
    [
      "twice for one measurand",
      predict(1, { measurand: "pitch-curve", expected: 3, tolerance: null }),
      [
        `${place(1)}/measurand: found a prediction of pitch-curve a second time; allowed each key once`,
        "/hypotheses/0/toleranceCorrelations/0/a: found the unknown prediction pitch-crest; allowed pitch-curve, grain-crest, grain-foot, ripple-crest, shimmer-noon, slide-april, booms-april",
      ],
    ],
    ...[0, 1, -0.1, 1.2].map((probability): Case => [
      `probability ${probability}`,
      predict(6, { probability }),
      [
        `${place(6)}/probability: found ${probability}; allowed a number above 0 and below 1: nothing is certain beforehand`,
      ],
    ]),
    [
      "an event without a probability, with an expectation",
      predict(6, { probability: null, expected: 1 }),
      [
        `${place(6)}/expected: found expected of an event; allowed a probability`,
        `${place(6)}/probability: found nothing; allowed a number above 0 and below 1: how probable the event is`,
      ],
    ],
    [
      "a probability of a quantity",
      predict(5, { probability: 0.5 }),
      [
        `${place(5)}/probability: found a probability on the scale magnitude; allowed expected, or a tolerance with bounds; a probability is for events`,
      ],
    ],
    [
      "nothing expected",
      predict(4, { expected: null }),
      [
        `${place(4)}/expected: found nothing; allowed a number or an expression, or a tolerance with bounds (interval, atMost, atLeast)`,
      ],
    ],
    ...[
      ["interval", { family: "interval", lower: 1, upper: 2 }] as const,
      ["atMost", { family: "atMost", bound: 100 }] as const,
    ].map(([family, tolerance]): Case => [
      `expected beside ${family}`,
      (document) => {
        predict(1, { tolerance, expected: 80 })(document);
        document.hypotheses[0].toleranceCorrelations = [];
      },
      [
        `${place(1)}/expected: found expected beside the tolerance ${family}; allowed one of the two: such a tolerance says by itself where the value lies`,
      ],
    ]),
    [
      "a one-sided tolerance without a uniform reference",
      predict(5, { tolerance: { family: "atMost", bound: 20 }, expected: null }),
      [
        `${place(5)}/tolerance: found atMost on shimmer-noon, whose reference is normal; allowed a one-sided tolerance where the reference is uniform`,
      ],
    ],
    [
      "a bound beyond the reference",
      (document) => (document.hypotheses[1].predictions[0].tolerance.bound = 20),
      [
        "/hypotheses/1/predictions/0/tolerance/bound: found 20; allowed a bound above the reference's end 20",
      ],
    ],
    [
      "an interval without a width",
      predict(3, { tolerance: { family: "interval", lower: 1, upper: 1 } }),
      [`${place(3)}/tolerance/upper: found 1; allowed a number above 1`],
    ],
    [
      "an interval on a circle that is one point",
      (document) =>
        (document.hypotheses[1].predictions[3].tolerance = {
          family: "interval",
          lower: 10,
          upper: 10,
        }),
      ["/hypotheses/1/predictions/3/tolerance/upper: found 10; allowed another end than 10"],
    ],
    [
      "a one-sided tolerance on a circle",
      predict(4, { tolerance: { family: "atLeast", bound: 2 }, expected: null }),
      [
        `${place(4)}/tolerance: found atLeast on the scale cyclic; allowed normal, interval, splitNormal, or none: exact`,
      ],
    ],
    [
      "a normal tolerance on a rate, a gamma one on a value",
      (document) => {
        predict(7, { tolerance: { family: "normal", sd: 1 }, expected: 3 })(document);
        predict(5, { tolerance: { family: "gamma", mean: 3, sd: 1 }, expected: null })(document);
      },
      [
        `${place(5)}/tolerance: found gamma on the scale magnitude; allowed normal, interval, atMost, atLeast, splitNormal, or none: exact`,
        `${place(7)}/tolerance: found normal on the scale count; allowed gamma, or none: exact`,
      ],
    ],
    [
      "a rate below zero, as a number and as an expression",
      (document) => {
        document.hypotheses[1].predictions[4].expected = -1;
        predict(7, { tolerance: null, expected: "-h" })(document);
      },
      [
        `${place(7)}/expected: found an expression without a value at any parameter tried; allowed a finite value somewhere between the 1 % and 99 % of the priors, at least 0 on the scale count`,
        "/hypotheses/1/predictions/4/expected: found -1; allowed a rate of at least 0",
      ],
    ],
    ["a rate of zero", (document) => (document.hypotheses[1].predictions[4].expected = 0), []],
    [
      "a relative tolerance on a circle",
      predict(4, { tolerance: { family: "normal", sd: 0.1, relative: true } }),
      [
        `${place(4)}/tolerance/relative: found a relative tolerance on the scale cyclic; allowed false`,
      ],
    ],
    [
      "a smooth tolerance without what it runs along",
      predict(0, { tolerance: { family: "normal", sd: 1, sharing: "smooth" } }),
      [
        `${place(0)}/tolerance/in: found nothing; allowed a condition of the observable, for smooth`,
        `${place(0)}/tolerance/length: found nothing; allowed a number above 0, for smooth`,
      ],
    ],
    [
      "a smooth tolerance along an unknown condition",
      predict(0, {
        tolerance: { family: "normal", sd: 1, sharing: "smooth", in: "wind", length: 1 },
      }),
      [`${place(0)}/tolerance/in: found the unknown condition wind; allowed slope, day, humidity`],
    ],
    [
      "a smooth tolerance on a constant",
      (document) => {
        const tolerance = { family: "normal", sd: 1, sharing: "smooth", in: "slope", length: 1 };
        predict(1, { tolerance })(document);
        document.hypotheses[0].toleranceCorrelations = [];
      },
      [
        `${place(1)}/tolerance/sharing: found a smooth tolerance on a constant; allowed common or each`,
      ],
    ],
    [
      "length without smooth",
      predict(4, { tolerance: { family: "normal", sd: 1, length: 2 } }),
      [
        `${place(4)}/tolerance/length: found length with the sharing common; allowed length with smooth only`,
      ],
    ],
    [
      "given what is no event, and given itself",
      (document) => {
        predict(0, { given: { measurand: "pitch-crest", occurred: true } })(document);
        predict(6, { given: { measurand: "slide-april", occurred: true } })(document);
      },
      [
        `${place(0)}/given/measurand: found pitch-crest, on the scale linear; allowed an event's measurand`,
        `${place(6)}/given/measurand: found slide-april, which is predicted itself; allowed another measurand`,
      ],
    ],
    [
      "withheld twice",
      slip((hypothesis) => (hypothesis.withheld = ["grain-ratio", "grain-ratio"])),
      [
        "/hypotheses/0/withheld/1: found the measurand grain-ratio a second time; allowed each key once",
      ],
    ],
  ]);
});
