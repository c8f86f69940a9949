import type { CampaignDocument } from "@weighhouse/campaign/document";
import { randomSource } from "@weighhouse/numerics/random-source";
import { documentFrom } from "./documents";

/**
 * A campaign of two curves of one observable and everything whose design is fixed on them: references
 * of every family, expectations linear in parameters of normal and uniform priors, every tolerance
 * without unknowns of each reading's own, shared errors common and per batch.
 *
 * `mixed`: relative errors, a split normal, a parameter that is linear on one curve and
 * not on the other.
 *
 * @param level of the values; `unit` is the size of what varies about it
 */
export function randomCurves(
  seed: number,
  { level = 0, unit = 1, count = 24, mixed = false } = {},
): CampaignDocument {
  const random = randomSource(seed);
  const between = (lower: number, upper: number) => lower + (upper - lower) * random.uniform();
  const value = (offset: number) => level + unit * offset;
  const references = [
    { family: "polynomial", in: "x", degree: random.below(4), centre: value(0.3), sd: 2 * unit },
    { family: "normal", mean: value(-0.2), sd: unit, scatter: random.below(2) * 0.4 * unit },
    { family: "uniform", lower: value(-6), upper: value(7), scatter: 0.3 * unit },
  ];
  const measurands = ["one", "two"].map((key) => ({
    key,
    observable: "o",
    shape: "curve",
    scatter: random.below(2) * 0.2 * unit,
    where: { x: [-1, 3] },
    reference: references[random.below(3)],
  }));
  const parameters = [
    { key: "a", prior: { family: "normal", mean: value(0.1), sd: unit } },
    { key: "b", prior: { family: "normal", mean: 0.2 * unit, sd: 0.6 * unit } },
    { key: "c", prior: { family: "uniform", lower: -2 * unit, upper: 3 * unit } },
    { key: "k", prior: { family: "fixed", value: value(0.4) } },
  ];
  const tolerance = (more: object) => ({ tolerance: { family: "normal", ...more } });
  const splitNormal = {
    expected: "k",
    tolerance: { family: "splitNormal", plus: 0.5 * unit, minus: unit },
  };
  const plain = [
    [{ expected: "a + b * x" }, { expected: "a - b * x^2" }],
    [{ expected: "a + c * x", ...tolerance({ sd: 0.4 * unit }) }, null],
    [{ expected: "a + b * sin(x)", ...tolerance({ sd: 0.5 * unit, sharing: "each" }) }, null],
    [
      { expected: "k", ...tolerance({ sd: (0.5 * unit) / (Math.abs(level) + 1), relative: true }) },
      { expected: "k + 0 * x", ...tolerance({ sd: 1e-7, relative: true, sharing: "each" }) },
    ],
    [{ tolerance: { family: "interval", lower: value(-1), upper: value(2) } }, null],
  ];
  const numerical = [
    [{ expected: "k" }, splitNormal],
    [{ expected: "k + b * x" }, { expected: "k + b * x + 0.1 * b * sin(b)" }],
  ];
  const said = mixed ? numerical : plain;
  return documentFrom({
    observables: [
      { key: "o", title: "O", unit: "m", scale: "linear", conditions: [{ key: "x", unit: "s" }] },
    ],
    measurands,
    sharedErrors: [
      { key: "zero", sd: 0.5 * unit },
      { key: "night", sd: 0.3 * unit, per: "batch" },
      { key: "share", sd: 0.05 / (Math.abs(level) + 1), relative: true },
    ],
    hypotheses: said.map((predictions, h) => ({
      key: `h${h}`,
      title: `H${h}`,
      parameters,
      predictions: predictions.flatMap((one, m) =>
        one === null ? [] : [{ measurand: measurands[m]!.key, ...one }],
      ),
    })),
    measurements: Array.from({ length: count }, (_, i) => {
      const x = between(-1, 3);
      const offset = 0.2 + 0.4 * x + between(-1, 1);
      const shared = [
        ...(random.below(2) > 0 ? [{ error: "zero", coefficient: between(-1, 1) }] : []),
        ...(random.below(2) > 0 ? [{ error: "night" }] : []),
        ...(mixed && random.below(6) === 0 ? [{ error: "share" }] : []),
      ];
      const sd = between(0.2, 1) * unit;
      return {
        id: `x${i}`,
        measurand: measurands[random.below(2)]!.key,
        conditions: { x },
        value: value(offset),
        sd,
        batch: `night-${random.below(3)}`,
        shared,
      };
    }),
  });
}
