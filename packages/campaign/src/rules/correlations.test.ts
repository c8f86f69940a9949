import { describe } from "vitest";
import { check, slip } from "../testing/refusals";

describe("correlations", () => {
  check([
    [
      "of a tolerance that isn't normal and common",
      slip((hypothesis) => (hypothesis.toleranceCorrelations[0].b = "ripple-crest")),
      [
        "/hypotheses/0/toleranceCorrelations/0/b: found the prediction of ripple-crest; allowed one with a normal tolerance whose sharing is common",
      ],
    ],
    [
      "with itself, and twice in either order",
      (document) => {
        document.correlations = [
          { a: "south:7", b: "south:7", coefficient: 0.1 },
          { a: "south:7", b: "south:10", coefficient: 0.1 },
          { a: "south:10", b: "south:7", coefficient: 0.1 },
        ];
      },
      [
        "/correlations/0/b: found south:7 with itself; allowed two different ones",
        "/correlations/2: found south:10 and south:7 a second time; allowed each pair once",
      ],
    ],
    [
      "of three measurements that can't be anticorrelated so, named, beside two that can",
      (document) => {
        const three = ["south:1", "south:4", "south:7"];
        document.correlations = [
          { a: "north:1", b: "north:2", coefficient: 0.9 },
          ...[0, 1, 2].map((i) => ({ a: three[i], b: three[(i + 1) % 3], coefficient: -0.6 })),
        ];
      },
      [
        "/correlations: found correlations of south:1, south:4, south:7 that can't be so together; allowed a matrix that is positive definite",
      ],
    ],
    [
      "of which one is set aside, so that the others can be so",
      (document) => {
        const three = ["south:1", "mast:3", "south:7"];
        document.correlations = [0, 1, 2].map((i) => ({
          a: three[i],
          b: three[(i + 1) % 3],
          coefficient: -0.6,
        }));
      },
      [],
    ],
    [
      "of tolerances that can't be so together",
      slip((hypothesis) => {
        for (const index of [3, 4, 5]) {
          Object.assign(hypothesis.predictions[index], {
            expected: 1,
            tolerance: { family: "normal", sd: 1 },
          });
        }
        const three = ["grain-foot", "ripple-crest", "shimmer-noon"];
        hypothesis.toleranceCorrelations = [0, 1, 2].map((i) => ({
          a: three[i],
          b: three[(i + 1) % 3],
          coefficient: -0.6,
        }));
      }),
      [
        "/hypotheses/0/toleranceCorrelations: found correlations of grain-foot, ripple-crest, shimmer-noon that can't be so together; allowed a matrix that is positive definite",
      ],
    ],
    [
      "of tolerances by one",
      slip((hypothesis) => (hypothesis.toleranceCorrelations[0].coefficient = -1)),
      [
        "/hypotheses/0/toleranceCorrelations/0/coefficient: found -1; allowed a number above -1 and below 1",
      ],
    ],
    [
      "of one, and of an event",
      (document) => {
        document.correlations = [{ a: "south:7", b: "mast:1", coefficient: 1 }];
      },
      [
        "/correlations/0/coefficient: found 1; allowed a number above -1 and below 1",
        "/correlations/0/b: found the event or count mast:1; allowed a measurement with a value",
      ],
    ],
  ]);
});
