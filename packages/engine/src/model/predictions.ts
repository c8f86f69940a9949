import { EACH_FLAT, NORMAL } from "../block/problem";
import { splitNormalUnknown, uniformUnknown } from "../block/outer-unknowns";
import type { PredictionFrame, ToleranceFrame } from "../frame";
import { wrapped } from "../scoring-space";
import { expectExpression } from "./expected-values";
import { cutsOf } from "./levels";
import { fixedValue, loadsRelative, type Expected, type Section } from "./section";
import { levelKey } from "./shared-unknowns";
import { smoothTolerance } from "./smooth-tolerance";

type Of<F extends ToleranceFrame["family"]> = Extract<ToleranceFrame, { family: F }>;

/** What a prediction expects, with the unknowns of its parameters and its tolerance. */
export function expectPrediction(section: Section, prediction: PredictionFrame): Expected {
  const { tolerance } = prediction;
  if ("width" in tolerance) return expectEachInterval(section, tolerance);
  const expected = expectedOf(section, prediction);
  if (tolerance.family === "splitNormal") addSplitNormal(section, tolerance);
  if (tolerance.family === "normal") addNormal(section, tolerance, expected);
  return expected;
}

function expectedOf(section: Section, prediction: PredictionFrame): Expected {
  if (prediction.expectation !== null) return expectExpression(section, prediction);
  const { assembly, begin, rows, centre } = section;
  assembly.base.fill(prediction.expected! - centre, begin, begin + rows.length);
  return fixedValue(rows.length, prediction.natural!);
}

function addNormal(section: Section, tolerance: Of<"normal">, expected: Expected): void {
  if (tolerance.sharing === "each") {
    if (tolerance.relative) addEachRelative(section, tolerance.sd, expected);
    return;
  }
  if (tolerance.sharing === "smooth") {
    smoothTolerance(section, tolerance, expected);
    return;
  }
  const { assembly, part, rows, begin } = section;
  const place = assembly.addLinear(levelKey(part.measurand), { kind: "normal" });
  const { sd, relative } = tolerance;
  if (!relative) rows.forEach((_, i) => assembly.load(place, begin + i, sd));
  else if (expected.moving) {
    assembly.loadMoving(place, (column) => {
      rows.forEach((_, i) => (column[begin + i] = sd * Math.abs(expected.values[i]!)));
    });
  } else {
    rows.forEach((_, i) => assembly.load(place, begin + i, sd * Math.abs(expected.values[i]!)));
  }
}

/** One's own variance where what is expected is known, else an unknown of each measurement's own. */
function addEachRelative(
  { assembly, part, rows, begin }: Section,
  sd: number,
  expected: Expected,
): void {
  if (!expected.moving) return;
  rows.forEach((_, i) => {
    const key = `${levelKey(part.measurand)} of row ${i}`;
    const place = assembly.addLinear(key, { kind: "normal" });
    assembly.loadMoving(place, (column) => {
      column[begin + i] = sd * Math.abs(expected.values[i]!);
    });
  });
}

/** The variance that a relative tolerance of each one's adds to a row, where it is known. */
export function eachRelativeVariance(
  prediction: PredictionFrame,
  expected: Expected,
  i: number,
): number {
  const { tolerance } = prediction;
  if (tolerance.family !== "normal" || tolerance.sharing !== "each" || !tolerance.relative) {
    return 0;
  }
  return expected.moving ? 0 : (tolerance.sd * expected.values[i]!) ** 2;
}

/** The circle is cut where what is expected has it, whatever the offset. */
function addSplitNormal(section: Section, tolerance: Of<"splitNormal">): void {
  const { assembly, part, rows, begin, frame } = section;
  const place = assembly.addOuter(levelKey(part.measurand), () =>
    splitNormalUnknown(tolerance, { counted: true }),
  );
  assembly.expect((base) => {
    const offset = assembly.values[place]!;
    rows.forEach(({ observed }, i) => {
      // A moving expectation has just been filled in; a fixed one is the base itself.
      const expected = base[begin + i]!;
      base[begin + i] = observed - wrapped(observed - expected, frame.period) + offset;
    });
    return true;
  });
}

/** An interval for each measurement: flat in closed form, or a level of its own. */
function expectEachInterval(
  section: Section,
  { lower, upper, width }: Of<"interval" | "atMost" | "atLeast">,
): Expected {
  const { assembly, open, part, rows, begin, centre, frame } = section;
  const expected: Expected = {
    values: new Float64Array(rows.length),
    moving: loadsRelative(rows),
    coefficients: [],
  };
  rows.forEach((row, i) => {
    if (open.kind[begin + i] === NORMAL && frame.period === 0 && !row.relative.includes(true)) {
      open.kind[begin + i] = EACH_FLAT;
      open.eachFlat.lower[begin + i] = lower - centre;
      open.eachFlat.upper[begin + i] = upper - centre;
      return;
    }
    const breaks = cutsOf({ frame, rows: [row], centre }, { lower, width });
    const place = assembly.addOuter(`${levelKey(part.measurand)} of row ${i}`, () =>
      uniformUnknown({ lower, upper, width }, { counted: true, breaks }),
    );
    assembly.expect((base) => {
      const level = assembly.values[place]!;
      expected.values[i] = level;
      base[begin + i] = level - centre;
      return true;
    });
  });
  return expected;
}
