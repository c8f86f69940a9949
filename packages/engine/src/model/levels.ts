import { normalUnknown, uniformUnknown } from "../block/outer-unknowns";
import type { LinearUnknown } from "../block/problem";
import type { NormalRole, PolynomialRole, UniformRole } from "../frame";
import { LEAST_SD } from "../sizes";
import { legendre } from "./legendre";
import { fixedValue, loadsRelative, type Expected, type Section } from "./section";
import { levelKey } from "./shared-unknowns";

/** A level this many of its widths away from the rows is told from its own bound. */
const FAR = 1e3;

/** A known level, or one of N(mean, sd^2). */
export function expectNormal(section: Section, role: NormalRole): Expected {
  const { assembly, part, rows, begin, centre } = section;
  const { mean, sd } = role;
  // A reference's level is what a relative shared error is a share of; a prediction's is its mean.
  if (part.reference && sd > 0 && loadsRelative(rows)) {
    return expectOuter(section, () => normalUnknown(mean, sd, { counted: true }));
  }
  assembly.base.fill(mean - centre, begin, begin + rows.length);
  if (sd > 0) {
    const place = assembly.addLinear(levelKey(part.measurand), { kind: "normal" });
    rows.forEach((_, i) => assembly.load(place, begin + i, sd));
  }
  return fixedValue(rows.length, mean);
}

/** One level between bounds: a linear unknown, but on a circle and where it scales shared errors. */
export function expectUniform(section: Section, role: UniformRole): Expected {
  const { assembly, part, rows, begin, centre, frame } = section;
  const { lower, width } = role;
  // Bounds that are one number as good as: a known level.
  if (width < LEAST_SD) {
    assembly.base.fill(lower - centre, begin, begin + rows.length);
    return fixedValue(rows.length, lower);
  }
  if (frame.period > 0 || loadsRelative(rows)) {
    const breaks = cutsOf(section, role);
    return expectOuter(section, () => uniformUnknown(role, { counted: true, breaks }));
  }
  const { origin, unknown } = flatLevel(role, centre);
  const place = assembly.addLinear(levelKey(part.measurand), unknown);
  assembly.base.fill(origin - centre, begin, begin + rows.length);
  rows.forEach((_, i) => assembly.load(place, begin + i, 1));
  // Nothing is a share of it: no shared error here is relative.
  return fixedValue(rows.length, Number.NaN);
}

/** A level between bounds as a linear unknown, and what it is counted from. */
export function flatLevel(
  { lower, upper, width }: { lower: number; upper: number; width: number },
  centre: number,
): { origin: number; unknown: LinearUnknown } {
  const far = Math.max(Math.abs(lower - centre), Math.abs(upper - centre)) > FAR * width;
  const origin = far ? lower : centre;
  const bounds = { lower: lower - origin, upper: far ? width : upper - origin };
  return { origin, unknown: { kind: "flat", ...bounds, width } };
}

function expectOuter(section: Section, make: Parameters<Section["assembly"]["addOuter"]>[1]) {
  const { assembly, part, rows, begin, centre } = section;
  const place = assembly.addOuter(levelKey(part.measurand), make);
  const expected: Expected = {
    values: new Float64Array(rows.length),
    moving: true,
    coefficients: [],
  };
  assembly.expect((base) => {
    const level = assembly.values[place]!;
    expected.values.fill(level);
    base.fill(level - centre, begin, begin + rows.length);
    return true;
  });
  return expected;
}

/** Where a circle is cut: opposite each reading, counted from the lower bound. */
export function cutsOf(
  { frame, rows, centre }: Pick<Section, "frame" | "rows" | "centre">,
  { lower, width }: Pick<UniformRole, "lower" | "width">,
): number[] {
  const { period } = frame;
  if (period === 0) return [];
  const cuts = new Set<number>();
  for (const { observed } of rows) {
    const opposite = observed + centre + period / 2 - lower;
    const first = opposite - period * Math.floor(opposite / period);
    for (let cut = first; cut < width; cut += period) if (cut > 0) cuts.add(cut);
  }
  return [...cuts].sort((a, b) => a - b);
}

/** A polynomial's coefficients as linear unknowns. */
export function expectPolynomial(section: Section, role: PolynomialRole): Expected {
  const { assembly, part, rows, begin, centre } = section;
  const { condition, degree, sd } = role;
  const coefficients = Array.from({ length: degree + 1 }, (_, n) =>
    assembly.addLinear(`coefficient ${part.measurand} ${n}`, { kind: "normal" }),
  );
  assembly.base.fill(role.centre - centre, begin, begin + rows.length);
  const values = new Float64Array(degree + 1);
  rows.forEach(({ conditions }, i) => {
    legendre(role, conditions[condition]!, values);
    coefficients.forEach((place, n) => assembly.load(place, begin + i, sd * values[n]!));
  });
  return { ...fixedValue(rows.length, role.centre), coefficients };
}
