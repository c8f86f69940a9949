import { cubature } from "./cubature";
import type { CubeIntegral, CubeMode, CubeOptions } from "./cube-integral";
import { lineIntegral } from "./line-integral";
import { nestedSampling } from "./nested-sampling";
import { NumericsError } from "./numerics-error";

const MOST_DIMENSIONS = 30;
const LINE_RELATIVE = 1e-11;
const SQUARE_RELATIVE = 1e-8;
const CUBE_RELATIVE = 5e-7;
/** The faces themselves are never asked for: a prior's quantile is often infinite there. */
const FIRST = 2 ** -60;
const LAST = 1 - 2 ** -53;

/**
 * ln of the integral of a density over the unit cube,
 *
 *   ln Z = ln int over [0, 1]^d of exp(logDensity(u)) du
 *
 * by adaptive Gauss-Kronrod panels for one dimension, cubature for two and three, nested sampling
 * from four on; for none it is the density itself.
 *
 * @param logDensity natural log of a density at a place in (0, 1)^d, any finite number, -Infinity where that is 0 (NaN
 *   counts as 0 too); smooth but for `breaks` where accuracy counts; doesn't keep its argument
 * @param dimension 0 to 30
 * @returns never NaN; `ln` -Infinity where the density is 0 everywhere
 * @throws {NumericsError} `out-of-domain` for another dimension, a mode or breaks that don't fit
 *   it, or a density that is infinite
 */
export function integrateUnitCube(
  logDensity: (u: Float64Array) => number,
  dimension: number,
  options: CubeOptions,
): CubeIntegral {
  const { seed, modes = [], breaks = [] } = options;
  refuseMisfits(dimension, modes, breaks);
  const safe = (u: Float64Array) => {
    for (let i = 0; i < u.length; i += 1) u[i] = Math.min(Math.max(u[i]!, FIRST), LAST);
    const ln = logDensity(u);
    if (ln < Infinity) return ln;
    if (Number.isNaN(ln)) return -Infinity;
    throw new NumericsError(
      "out-of-domain",
      `a density must be finite; found Infinity at (${u.join(", ")})`,
    );
  };
  if (dimension === 0) return onePoint(safe(new Float64Array(0)));
  if (dimension === 1) {
    const u = new Float64Array(1);
    const onLine = (x: number) => {
      u[0] = x;
      return safe(u);
    };
    const relative = options.relative ?? LINE_RELATIVE;
    return lineIntegral(onLine, { modes, breaks: breaks[0] ?? [], relative });
  }
  if (dimension === 2 || dimension === 3) {
    const { relative = dimension === 2 ? SQUARE_RELATIVE : CUBE_RELATIVE } = options;
    return cubature(safe, dimension, { modes, breaks, relative });
  }
  return nestedSampling(safe, dimension, { seed, spent: options.spent });
}

function onePoint(ln: number): CubeIntegral {
  const nothing = ln === -Infinity;
  const nodes = { points: new Float64Array(0), lnWeights: new Float64Array(nothing ? 0 : 1) };
  return { ln, error: 0, evaluations: 1, information: 0, nodes };
}

function refuseMisfits(
  dimension: number,
  modes: readonly CubeMode[],
  breaks: readonly (readonly number[])[],
): void {
  if (!Number.isInteger(dimension) || dimension < 0 || dimension > MOST_DIMENSIONS) {
    throw new NumericsError(
      "out-of-domain",
      `integrals are done over 0 to ${MOST_DIMENSIONS} unknowns; found ${dimension}`,
    );
  }
  for (const { centre, scale } of modes) {
    const fits =
      centre.length === dimension &&
      (scale.length === dimension || scale.length === dimension * dimension);
    const widths =
      scale.length === dimension ? scale : scale.filter((_, i) => i % (dimension + 1) === 0);
    if (
      fits &&
      centre.every(Number.isFinite) &&
      scale.every(Number.isFinite) &&
      widths.every((w) => w > 0)
    )
      continue;
    throw new NumericsError(
      "out-of-domain",
      `a mode needs a centre of ${dimension} numbers and widths above 0; found (${centre.join(", ")}) and (${scale.join(", ")})`,
    );
  }
  if (breaks.length > dimension) {
    throw new NumericsError(
      "out-of-domain",
      `breaks are given per axis; found ${breaks.length} lists for ${dimension} axes`,
    );
  }
}
