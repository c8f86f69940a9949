import { describe, expect, test } from "vitest";
import { documentFrom, standingsFrom } from "./testing/documents";

type Part = Record<string, unknown>;

const scales: Record<string, Part> = {
  linear: { unit: "m", scale: "linear" },
  log10: { unit: "m", scale: "log10" },
  magnitude: { unit: "mag", scale: "magnitude" },
  cyclic: { unit: "deg", scale: "cyclic", period: 360 },
  count: { unit: "1", scale: "count" },
};

/** The combined value of one measurand, with what the standings say beside it. */
function combinedOf(
  scale: keyof typeof scales,
  measurements: Part[],
  { reference, more = {} }: { reference: Part; more?: Part },
) {
  const { measurand = {}, ...rest } = more as { measurand?: Part };
  const { measurands, warnings } = standingsFrom(
    documentFrom({
      observables: [{ key: "o", title: "O", ...scales[scale] }],
      measurands: [{ key: "x", observable: "o", reference, ...measurand }],
      hypotheses: [{ key: "h", title: "H", predictions: [] }],
      measurements: measurements.map((one, i) => ({ id: `a${i}`, measurand: "x", ...one })),
      ...rest,
    }),
  );
  return { ...measurands[0]!, codes: warnings.map(({ code }) => code) };
}

const wide = { family: "uniform", lower: -1000, upper: 1000 };

/** Mean and sd of exp(ln) over an interval, by Simpson's rule with many points. */
function momentsOf(ln: (x: number) => number, lower: number, upper: number) {
  const n = 200000;
  const step = (upper - lower) / n;
  let top = -Infinity;
  for (let i = 0; i <= n; i += 50) top = Math.max(top, ln(lower + i * step));
  let [whole, first, second] = [0, 0, 0];
  const centre = (lower + upper) / 2;
  for (let i = 0; i <= n; i += 1) {
    const x = lower + i * step;
    const weight = (i === 0 || i === n ? 1 : i % 2 === 1 ? 4 : 2) * Math.exp(ln(x) - top);
    whole += weight;
    first += weight * (x - centre);
    second += weight * (x - centre) ** 2;
  }
  const mean = first / whole;
  return { mean: centre + mean, sd: Math.sqrt(second / whole - mean * mean) };
}

/** ln Phi(z) by the error function's series and continued fraction (Abramowitz & Stegun 7.1). */
function lnPhi(z: number): number {
  if (z > 8) return 0;
  if (z < -5) {
    let fraction = 0;
    for (let k = 60; k > 0; k -= 1) fraction = k / (-z + fraction);
    return -(z * z) / 2 - Math.log(Math.sqrt(2 * Math.PI) * (-z + fraction));
  }
  let [term, sum] = [z, z];
  for (let k = 1; k < 200; k += 1) {
    term *= (z * z) / (2 * k + 1);
    sum += term;
  }
  return Math.log(0.5 + (sum * Math.exp(-(z * z) / 2)) / Math.sqrt(2 * Math.PI));
}

const barlow = (d: number, plus: number, minus: number) => {
  const v = plus * minus + (plus - minus) * d;
  const [low, high] = [Math.min(plus, minus) ** 2, Math.max(plus, minus) ** 2];
  return Math.min(Math.max(v, low), high);
};

/** Least cost on a fine grid, then golden sections; the width at one more by bisection. */
function bruteLeast(cost: (mu: number) => number, lower: number, upper: number) {
  let best = lower;
  const step = (upper - lower) / 1000;
  for (let mu = lower; mu <= upper; mu += step) if (cost(mu) < cost(best)) best = mu;
  let [a, b] = [best - step, best + step];
  for (let k = 0; k < 80; k += 1) {
    const [c, d] = [b - 0.618034 * (b - a), a + 0.618034 * (b - a)];
    if (cost(c) < cost(d)) b = d;
    else a = c;
  }
  const value = (a + b) / 2;
  const goal = cost(value) + 1;
  const edge = (end: number) => {
    let [inside, outside] = [value, value];
    while (cost(outside) < goal) outside += (end - value) / 500;
    for (let k = 0; k < 80; k += 1) {
      const middle = (inside + outside) / 2;
      if (cost(middle) < goal) inside = middle;
      else outside = middle;
    }
    return (inside + outside) / 2;
  };
  return { value, sd: (edge(upper) - edge(lower)) / 2, chiSquare: cost(value) };
}

describe("values with two sides combine to the maximum of the likelihood", () => {
  const three = [
    { value: 1.9, plus: 0.7, minus: 0.5 },
    { value: 2.4, plus: 0.6, minus: 0.8 },
    { value: 3.1, plus: 0.5, minus: 0.4 },
  ];
  const costOf = (data: typeof three, extra: number) => (mu: number) =>
    data.reduce((sum, { value, plus, minus }) => sum + seen(mu - value, [plus, minus, extra]), 0);

  /** What is read is the level with its scatter t: the least over t. */
  const seen = (d: number, [plus, minus, extra]: [number, number, number]) => {
    const at = (t: number) => (d + t) ** 2 / barlow(d + t, plus, minus) + t ** 2 / extra;
    if (extra === 0) return d ** 2 / barlow(d, plus, minus);
    let best = 0;
    for (let t = -3; t <= 3; t += 0.02) if (at(t) < at(best)) best = t;
    let [a, b] = [best - 0.02, best + 0.02];
    for (let k = 0; k < 45; k += 1) {
      const [c, e] = [b - 0.618034 * (b - a), a + 0.618034 * (b - a)];
      if (at(c) < at(e)) b = e;
      else a = c;
    }
    return at((a + b) / 2);
  };

  test.each([
    ["alone", three, 0],
    ["with scatter", three, 0.3],
    ["beside a symmetric one", [...three, { value: 2.5, plus: 0.2, minus: 0.2 }], 0],
    ["far apart", [three[0]!, { value: 9, plus: 0.3, minus: 2 }], 0],
  ])("%s", (_name, data, scatter) => {
    const { combined } = combinedOf(
      "linear",
      data.map(({ value, plus, minus }) =>
        plus === minus ? { value, sd: plus } : { value, plus, minus },
      ),
      { reference: wide, more: { measurand: { scatter } } },
    );
    const expected = bruteLeast(costOf(data, scatter ** 2), 0, 10);
    expect(combined!.value).toBeCloseTo(expected.value, 7);
    expect(combined!.sd).toBeCloseTo(expected.sd, 9);
    expect(combined!.chiSquare).toBeCloseTo(expected.chiSquare, 9);
    expect(combined!.degreesOfFreedom).toBe(data.length - 1);
  });

  test("one alone is its own value, with the mean of its sides", () => {
    const { combined } = combinedOf("linear", [three[0]!], { reference: wide });
    expect(combined).toMatchObject({ value: 1.9, chiSquare: 0, birgeRatio: null });
    expect(combined!.sd).toBeCloseTo(0.6, 12);
  });

  test("on log10 the sides are those of the logarithm", () => {
    const { combined } = combinedOf("log10", [{ value: 10, plus: 90, minus: 9 }], {
      reference: { family: "uniform", lower: 1e-3, upper: 1e6 },
    });
    expect(combined!.value).toBeCloseTo(10, 9);
    expect(combined!.sd).toBeCloseTo(1, 12);
  });

  test("with a shared error the cost is the least over it as well", () => {
    const shared = [{ error: "zero", coefficient: 1 }];
    const loads = [0.4, 0.4, 0];
    const { combined } = combinedOf(
      "linear",
      three.map((one, i) => (loads[i] === 0 ? one : { ...one, shared })),
      { reference: wide, more: { sharedErrors: [{ key: "zero", sd: 0.4 }] } },
    );
    const cost = (mu: number) => {
      const at = (eta: number) =>
        three.reduce((sum, { value, plus, minus }, i) => {
          const d = mu + loads[i]! * eta - value;
          return sum + (d * d) / barlow(d, plus, minus);
        }, eta * eta);
      let [a, b] = [-5, 5];
      for (let k = 0; k < 60; k += 1) {
        const [c, d] = [b - 0.618034 * (b - a), a + 0.618034 * (b - a)];
        if (at(c) < at(d)) b = d;
        else a = c;
      }
      return at((a + b) / 2);
    };
    const expected = bruteLeast(cost, 1, 4);
    expect(combined!.value).toBeCloseTo(expected.value, 6);
    expect(combined!.sd).toBeCloseTo(expected.sd, 6);
    expect(combined!.chiSquare).toBeCloseTo(expected.chiSquare, 8);
  });
});

describe("limits", () => {
  test("compatible with zero join as 0 -+ limit / z", () => {
    const { combined } = combinedOf(
      "linear",
      [
        { value: 3, sd: 1 },
        { limit: "upper", value: 4, sigmas: 2 },
      ],
      { reference: wide },
    );
    // Weights 1 and 1/4.
    expect(combined!.value).toBeCloseTo(2.4, 12);
    expect(combined!.sd).toBeCloseTo(1 / Math.sqrt(1.25), 12);
    expect(combined!.chiSquare).toBeCloseTo(9 / 5, 12);
  });

  test("censored ones beside a value: flat x all likelihoods, mean and sd of that", () => {
    const { combined, codes } = combinedOf(
      "linear",
      [
        { value: 3, sd: 1 },
        { limit: "upper", value: 2.5, sd: 0.4 },
        { limit: "lower", value: 1, sd: 0.2 },
      ],
      { reference: { family: "normal", mean: 0, sd: 3 }, more: { measurand: { scatter: 0.3 } } },
    );
    const ln = (mu: number) =>
      -((mu - 3) ** 2) / 2 / 1.09 +
      lnPhi((2.5 - mu) / Math.hypot(0.4, 0.3)) +
      lnPhi((mu - 1) / Math.hypot(0.2, 0.3));
    const expected = momentsOf(ln, -6, 9);
    expect(combined!.value).toBeCloseTo(expected.mean, 9);
    expect(combined!.sd).toBeCloseTo(expected.sd, 9);
    expect(combined).toMatchObject({ chiSquare: null, degreesOfFreedom: null, birgeRatio: null });
    expect(codes).not.toContain("disagreeing-measurements");
  });

  test.each([
    ["uniform", { family: "uniform", lower: -2, upper: 6 }, () => 0, -2, 6],
    ["normal", { family: "normal", mean: 4, sd: 2 }, (mu: number) => -((mu - 4) ** 2) / 8, -12, 20],
  ])("alone are multiplied by the reference: %s", (_name, reference, prior, lower, upper) => {
    const { combined, thresholds } = combinedOf(
      "linear",
      [
        { limit: "upper", value: 3, sd: 0.5 },
        { limit: "upper", value: 8, confidence: 0.95 },
      ],
      { reference, more: { measurand: { thresholds: [{ key: "t", value: 2 }] } } },
    );
    const s = 8 / 1.6448536269514722;
    const ln = (mu: number) => prior(mu) + lnPhi((3 - mu) / 0.5) - (mu / s) ** 2 / 2;
    const expected = momentsOf(ln, lower, upper);
    expect(combined!.value).toBeCloseTo(expected.mean, 8);
    expect(combined!.sd).toBeCloseTo(expected.sd, 8);
    let [above, all] = [0, 0];
    const step = (upper - lower) / 400000;
    for (let mu = lower + step / 2; mu < upper; mu += step) {
      const mass = Math.exp(ln(mu));
      all += mass;
      if (mu > 2) above += mass;
    }
    expect(thresholds[0]!.probabilityAbove).toBeCloseTo(above / all, 5);
  });

  test("that share an error with a value: the error integrated at each level", () => {
    const shared = [{ error: "zero", coefficient: 1 }];
    const { combined } = combinedOf(
      "linear",
      [
        { value: 3, sd: 1, shared },
        { limit: "upper", value: 2.5, sd: 0.4, shared },
      ],
      { reference: wide, more: { sharedErrors: [{ key: "zero", sd: 0.8 }] } },
    );
    const ln = (mu: number) => {
      let sum = 0;
      for (let eta = -7; eta <= 7; eta += 0.02) {
        const level = mu + 0.8 * eta;
        sum += Math.exp(-(eta * eta) / 2 - (level - 3) ** 2 / 2 + lnPhi((2.5 - level) / 0.4));
      }
      return Math.log(sum);
    };
    let [whole, first, second] = [0, 0, 0];
    for (let mu = -6; mu <= 9; mu += 0.02) {
      const mass = Math.exp(ln(mu));
      whole += mass;
      first += mass * mu;
      second += mass * mu * mu;
    }
    const mean = first / whole;
    expect(combined!.value).toBeCloseTo(mean, 6);
    expect(combined!.sd).toBeCloseTo(Math.sqrt(second / whole - mean * mean), 6);
  });

  test("fainter than, on magnitudes: the flux was compatible with zero", () => {
    const { combined } = combinedOf("magnitude", [{ limit: "fainter", value: 22, sigmas: 5 }], {
      reference: { family: "uniform", lower: 15, upper: 30 },
    });
    const ln = (mu: number) => -((5 * 10 ** (-0.4 * (mu - 22))) ** 2) / 2;
    const expected = momentsOf(ln, 15, 30);
    expect(combined!.value).toBeCloseTo(expected.mean, 8);
    expect(combined!.sd).toBeCloseTo(expected.sd, 8);
  });

  test("linear noise on log10, values below zero too: the reference x the likelihood", () => {
    const { combined } = combinedOf(
      "log10",
      [
        { value: -0.4, sd: 1, noise: "linear" },
        { value: 1.3, sd: 0.7, noise: "linear" },
        { limit: "upper", value: 6, sigmas: 2, noise: "linear" },
      ],
      { reference: { family: "uniform", lower: 0.01, upper: 100 } },
    );
    const ln = (mu: number) =>
      -((10 ** mu + 0.4) ** 2) / 2 - ((10 ** mu - 1.3) / 0.7) ** 2 / 2 - (10 ** mu / 3) ** 2 / 2;
    const expected = momentsOf(ln, -2, 2);
    expect(Math.log10(combined!.value)).toBeCloseTo(expected.mean, 9);
    expect(combined!.sd).toBeCloseTo(expected.sd, 9);
  });
});

describe("relative shared errors", () => {
  test("scale with the combined value, not with the measured ones (Peelle's puzzle)", () => {
    // 10 % each and 20 % in common: D'Agostini, Nucl. Instrum. Meth. A 346 (1994) 306.
    const shared = [{ error: "scale", coefficient: 1 }];
    const { combined } = combinedOf(
      "linear",
      [
        { value: 1.5, sd: 0.15, shared },
        { value: 1, sd: 0.1, shared },
      ],
      { reference: wide, more: { sharedErrors: [{ key: "scale", sd: 0.2, relative: true }] } },
    );
    // The common factor shifts neither against the other: the weighted mean of the two.
    const weights = [1 / 0.15 ** 2, 1 / 0.1 ** 2];
    const mean = (1.5 * weights[0]! + weights[1]!) / (weights[0]! + weights[1]!);
    expect(combined!.value).toBeCloseTo(mean, 12);
    expect(combined!.value).toBeGreaterThan(1);
    const own = 1 / (weights[0]! + weights[1]!);
    expect(combined!.sd).toBeCloseTo(Math.sqrt(own + (0.2 * mean) ** 2), 10);
  });

  test("of one measurement only: the fixed point of the level that they scale with", () => {
    const { combined } = combinedOf(
      "linear",
      [
        { value: 5, sd: 0.3, shared: [{ error: "scale", coefficient: 1 }] },
        { value: 4, sd: 0.5 },
      ],
      { reference: wide, more: { sharedErrors: [{ key: "scale", sd: 0.1, relative: true }] } },
    );
    let level = 4.5;
    for (let k = 0; k < 100; k += 1) {
      const [a, b] = [1 / (0.09 + (0.1 * level) ** 2), 1 / 0.25];
      level = (5 * a + 4 * b) / (a + b);
    }
    expect(combined!.value).toBeCloseTo(level, 12);
  });

  test("are sd / ln 10 dex on log10 and 2.5 sd / ln 10 on magnitudes", () => {
    const shared = [{ error: "scale", coefficient: 1 }];
    const sharedErrors = [{ key: "scale", sd: 0.2, relative: true }];
    const log = combinedOf("log10", [{ value: 3, sdDex: 0.01, shared }], {
      reference: { family: "uniform", lower: 1e-3, upper: 1e3 },
      more: { sharedErrors },
    });
    expect(log.combined!.sd).toBeCloseTo(Math.hypot(0.01, 0.2 / Math.LN10), 12);
    const magnitude = combinedOf("magnitude", [{ value: 3, sd: 0.01, shared }], {
      reference: wide,
      more: { sharedErrors },
    });
    expect(magnitude.combined!.sd).toBeCloseTo(Math.hypot(0.01, 0.5 / Math.LN10), 12);
  });
});

test("correlated values are weighed by the inverse of their covariance", () => {
  const { combined } = combinedOf(
    "linear",
    [
      { value: 1, sd: 1 },
      { value: 2, sd: 2 },
    ],
    { reference: wide, more: { correlations: [{ a: "a0", b: "a1", coefficient: 0.6 }] } },
  );
  // C = [[1, 1.2], [1.2, 4]]: weights (4 - 1.2, 1 - 1.2) / (4 + 1 - 2.4), var |C| / 2.6.
  expect(combined!.value).toBeCloseTo((2.8 * 1 - 0.2 * 2) / 2.6, 12);
  expect(combined!.sd).toBeCloseTo(Math.sqrt((4 - 1.44) / 2.6), 12);
});

describe("counts", () => {
  const counts = [
    { count: 6, exposure: 2, background: 1.5 },
    { count: 1, exposure: 0.5, background: 0 },
    { count: 0, exposure: 1 },
  ];
  const lnLikelihood = (rate: number) =>
    6 * Math.log(2 * rate + 1.5) - 2 * rate + Math.log(0.5 * rate) - 0.5 * rate - rate;

  test.each([
    ["uniform", { family: "uniform", lower: 0, upper: 12 }, () => 0, 12],
    // Shape 4, rate 1.
    ["gamma", { family: "gamma", mean: 4, sd: 2 }, (rate: number) => 3 * Math.log(rate) - rate, 40],
  ])(
    "are the mean and sd of their rate, %s reference x likelihood",
    (_name, reference, prior, to) => {
      const { combined } = combinedOf("count", counts, { reference });
      const expected = momentsOf((rate) => prior(rate) + lnLikelihood(rate), 1e-9, to);
      expect(combined!.value).toBeCloseTo(expected.mean, 7);
      expect(combined!.sd).toBeCloseTo(expected.sd, 7);
      expect(combined!.chiSquare).toBeNull();
    },
  );

  test("under a gamma reference that peaks at zero", () => {
    // Shape 1/4, rate 1/16: over t = rate^(1/4) the reference is level at 0.
    const { combined, thresholds } = combinedOf("count", [{ count: 0, background: 2 }], {
      reference: { family: "gamma", mean: 4, sd: 8 },
      more: { measurand: { thresholds: [{ key: "t", value: 0.5 }] } },
    });
    // The background changes nothing where nothing was counted: a gamma of 1/4 and 1 + 1/16.
    expect(combined!.value).toBeCloseTo(0.25 / 1.0625, 9);
    expect(combined!.sd).toBeCloseTo(0.5 / 1.0625, 9);
    const clean = combinedOf("count", [{ count: 0 }], {
      reference: { family: "gamma", mean: 4, sd: 8 },
      more: { measurand: { thresholds: [{ key: "t", value: 0.5 }] } },
    });
    const [above] = clean.thresholds;
    expect(thresholds[0]!.probabilityAbove).toBeCloseTo(above!.probabilityAbove!, 10);
  });

  test("without background under a gamma reference it is a gamma", () => {
    const { combined } = combinedOf("count", [{ count: 7, exposure: 3 }], {
      reference: { family: "gamma", mean: 4, sd: 2 },
    });
    // Shape 4 + 7, rate 1 + 3.
    expect(combined!.value).toBeCloseTo(11 / 4, 12);
    expect(combined!.sd).toBeCloseTo(Math.sqrt(11) / 4, 12);
  });
});

describe("on a circle", () => {
  test("values about the period's end combine across it", () => {
    const { combined } = combinedOf(
      "cyclic",
      [
        { value: 358, sd: 1 },
        { value: 4, sd: 2 },
      ],
      { reference: { family: "uniform", lower: 0, upper: 360 } },
    );
    // 358 and 364, weights 1 and 1/4.
    expect(combined!.value).toBeCloseTo(359.2, 10);
    expect(combined!.sd).toBeCloseTo(1 / Math.sqrt(1.25), 12);
    expect(combined!.chiSquare).toBeCloseTo(36 / 5, 10);
  });

  test("values with two sides too", () => {
    const { combined } = combinedOf(
      "cyclic",
      [
        { value: 358, plus: 2, minus: 1 },
        { value: 4, sd: 2 },
      ],
      { reference: { family: "uniform", lower: 0, upper: 360 } },
    );
    const cost = (mu: number) => (mu + 2) ** 2 / barlow(mu + 2, 2, 1) + (mu - 4) ** 2 / 4;
    const expected = bruteLeast(cost, -10, 10);
    expect(combined!.value).toBeCloseTo(
      expected.value < 0 ? 360 + expected.value : expected.value,
      6,
    );
    expect(combined!.sd).toBeCloseTo(expected.sd, 8);
  });
});
