export interface Box {
  lower: Float64Array;
  upper: Float64Array;
  /** upper - lower, where that is known better than the two tell it. */
  width?: Float64Array;
}

/** Natural log of an integral; `error` is a quadrature's bound or a lattice's standard error. */
export interface LogIntegral {
  ln: number;
  error: number;
}
