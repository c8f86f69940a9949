import type { CubeIntegral, CubeOptions } from "./cube-integral";
import { NumericsError } from "./numerics-error";

export type LogDensity = (u: Float64Array) => number;

const MOST_DIMENSIONS = 30;

/**
 * ln of the integral of exp(logDensity) over [0, 1]^d.
 *
 * @param logDensity natural log of a density; -Infinity wherever it is 0; keeps no hold of its argument
 * @param dimension 0 to 30
 * @throws {NumericsError} `out-of-domain` for another dimension, or a mode or break that doesn't fit it
 */
export function integrateUnitCube(
  logDensity: LogDensity,
  dimension: number,
  _options: CubeOptions,
): CubeIntegral {
  if (!Number.isInteger(dimension) || dimension < 0 || dimension > MOST_DIMENSIONS) {
    throw new NumericsError(
      "out-of-domain",
      `integrals are done over 0 to ${MOST_DIMENSIONS} unknowns; found ${dimension}`,
    );
  }
  const ln = logDensity(new Float64Array(dimension).fill(0.5));
  return {
    ln,
    error: dimension === 0 ? 0 : Infinity,
    evaluations: 1,
    information: 0,
    nodes: { points: new Float64Array(dimension).fill(0.5), lnWeights: Float64Array.of(0) },
  };
}
