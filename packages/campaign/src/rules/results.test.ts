import { describe } from "vitest";
import { NEW, add, check } from "../testing/refusals";

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
