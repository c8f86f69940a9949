import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { ScoredScale } from "./scoring-space";

/** A measurand's true value under something said of it: a level, and noise of its own per measurement. */
export type Role =
  | { kind: "normal"; mean: number; sd: number; noise: number }
  | { kind: "uniform"; lower: number; upper: number; width: number; noise: number };

export interface MeasurandFrame {
  key: string;
  unit: string | null;
  scale: ScoredScale;
  closed: boolean;
  scatterVariance: number;
  /** What may be said of it; 0 is its reference. */
  roles: Role[];
  /** Variances that roles add to each measurement; 0 is none. `Role.noise` is an index here. */
  noises: number[];
  thresholds: { key: string; value: number }[];
  firstPostedAt: string | null;
  firstObservedAt: string | null;
}

export interface PredictionFrame {
  pointer: string;
  measurand: number;
  role: number;
  /** As given, in the observable's unit; what follows is in scoring space. */
  natural: number;
  expected: number;
  sd: number;
  lower: number;
  upper: number;
  decisive: boolean;
  registeredAt: string | null;
}

export interface HypothesisFrame {
  key: string;
  pointer: string;
  /** Its weight, divided by the number of its group's members. */
  share: number;
  predictions: PredictionFrame[];
  withheld: number[];
  registeredAt: string | null;
}

export interface SharedErrorFrame {
  key: string;
  sd: number;
  perBatch: boolean;
}

/** A campaign without its measurements, ready to score: numbers in scoring space, keys as indices. */
export interface Frame {
  document: CampaignDocument;
  measurands: MeasurandFrame[];
  measurandIndex: Map<string, number>;
  errors: SharedErrorFrame[];
  errorIndex: Map<string, number>;
  relativeErrors: Set<string>;
  hypotheses: HypothesisFrame[];
}

/** The place of a variance among a measurand's noises, added if new. */
export function noiseIndex(measurand: MeasurandFrame, variance: number): number {
  const there = measurand.noises.indexOf(variance);
  return there >= 0 ? there : measurand.noises.push(variance) - 1;
}
