import { logNormalInterval } from "@weighhouse/numerics/normal";
import { expect, test } from "vitest";
import { documentFrom, standingsFrom } from "./testing/documents";
import { panels } from "./testing/panels";

const SHARED_SD = 6;

/** Levels of `here` in [0, 100] and `there` in [0, 1], a reading of each, and an error they share. */
function lnSilence(readings: { here: number; there: number; far?: number }): number {
  const measurand = (key: string, upper: number) => ({
    key,
    observable: "o",
    reference: { family: "uniform", lower: 0, upper },
  });
  const reading = (key: string, value: number) => ({
    id: key,
    measurand: key,
    value,
    sd: 1,
    shared: [{ error: "zero" }],
  });
  const { here, there, far } = readings;
  const standings = standingsFrom(
    documentFrom({
      observables: [{ key: "o", title: "O", scale: "linear", unit: "m" }],
      measurands: [measurand("here", 100), measurand("there", 1), measurand("far", 500)],
      sharedErrors: [{ key: "zero", title: "Zero point", sd: SHARED_SD }],
      hypotheses: [{ key: "h", title: "H", predictions: [{ measurand: "here", expected: 50 }] }],
      measurements: [
        reading("here", here),
        reading("there", there),
        ...(far === undefined ? [] : [reading("far", far)]),
      ],
    }),
  );
  return standings.noModel.lnEvidence!;
}

/** The same with the shared error integrated last, by panels that don't adapt. */
function byPanels(levels: readonly (readonly [value: number, upper: number])[]): number {
  const density = (eta: number) => {
    let ln = -(eta * eta) / 2 - Math.log(2 * Math.PI) / 2;
    for (const [value, upper] of levels) {
      const mean = value - SHARED_SD * eta;
      ln += logNormalInterval(-mean, upper - mean) - Math.log(upper);
    }
    return Math.exp(ln);
  };
  return Math.log(panels(density, -20, 20, 800));
}

// Alone, the reading of `here` is eight standard deviations inside of its bounds on either side.
test("bounds that cut off nothing are let go", () => {
  const expected = byPanels([
    [50, 100],
    [0.5, 1],
  ]);
  expect(Math.abs(lnSilence({ here: 50, there: 0.5 }) - expected)).toBeLessThan(1e-9);
});

test.each([45, 55, 60, 80])(
  "with a reading of %d where at most 1 is allowed, the shared error draws the other level to its bound, which counts then",
  (there) => {
    const expected = byPanels([
      [50, 100],
      [there, 1],
    ]);
    const found = lnSilence({ here: 50, there });
    expect(Math.abs(found - expected)).toBeLessThan(1e-9 * Math.abs(expected));
  },
);

test("with a third level beside them", () => {
  const expected = byPanels([
    [50, 100],
    [60, 1],
    [250, 500],
  ]);
  const found = lnSilence({ here: 50, there: 60, far: 250 });
  expect(Math.abs(found - expected)).toBeLessThan(1e-9 * Math.abs(expected));
});
