import type { TriangularSystem } from "@weighhouse/numerics/triangular-system";

/**
 * What the measurements of some measurands say of their levels and of the shared errors' draws,
 * whatever a hypothesis says of those: as a function of x = (levels minus centres, draws),
 *
 *   ln L(x) = logNorm - (squares + rss + |R x - z|^2) / 2 - N ln(2 pi) / 2
 *
 * with the draws per batch already integrated out. Every hypothesis with the same noises uses the
 * same one, so that its own work doesn't grow with the number of measurements.
 */
export interface Marginal {
  /** Unknowns: a level per part, in the order asked for, then `draws`. */
  system: TriangularSystem;
  draws: number[];
  logNorm: number;
  squares: number;
}

/** A measurand and the noise class that it is looked at in. */
export interface Part {
  measurand: number;
  noise: number;
}
