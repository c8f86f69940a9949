/** A peak of the integrand that the caller knows of. */
export interface CubeMode {
  /** d coordinates of the peak; may lie outside [0, 1]^d where the cube cuts it off. */
  centre: Float64Array;
  /**
   * Its width: d standard deviations (for a peak at an edge: how far in it falls by half a nat), or
   * d x d numbers, row by row, the lower-triangular Cholesky factor of its covariance.
   */
  scale: Float64Array;
}

export interface CubeOptions {
  /** Any integer; the same seed gives the same bytes. Only four dimensions and more draw anything. */
  seed: number;
  /** Peaks known beforehand; a narrow one needs this to be found, none is trusted to be alone. */
  modes?: readonly CubeMode[];
  /** For each axis the places, in (0, 1), where the density has a kink or a step. */
  breaks?: readonly (readonly number[])[];
  /** Relative error of Z to stop at, up to three dimensions; 1e-11, 1e-8, 5e-7 for one to three. */
  relative?: number;
  /**
   * From four dimensions on: the share of the work allowed for that has been spent; at 1 and above
   * the integral ends where it is, with the error that says so. By default of five million calls.
   */
  spent?: () => number;
}

/** The posterior as weighted points: sum of exp(lnWeights) is 1. */
export interface CubeNodes {
  /** n x d, row by row, in (0, 1); empty where the integral is 0. */
  points: Float64Array;
  /** n natural logs. */
  lnWeights: Float64Array;
}

/** What `integrateUnitCube` of log-integral.ts gives: Z = int over [0, 1]^d of exp(logDensity). */
export interface CubeIntegral {
  /** ln Z; -Infinity where the density is 0 at every point looked at. */
  ln: number;
  /** Of ln Z: the rule's own bound up to three dimensions, a standard error from four on. */
  error: number;
  /** How often logDensity was called. */
  evaluations: number;
  /** Kullback-Leibler information of the posterior against the cube, in nats; 0 where Z is 0. */
  information: number;
  nodes: CubeNodes;
  /** Up to three dimensions: the posterior probability that coordinate `axis` is at most x. */
  cdf?: (axis: number, x: number) => number;
}
