import type { LogIntegral } from "@weighhouse/numerics/box";
import type { Frame } from "./frame";
import type { Marginals } from "./marginal";
import type { Loading } from "./readings";
import type { Level } from "./solve";
import type { GeneralEvidence } from "./model/block-parts";
import type { Sums } from "./sums";

/**
 * The derived values that can be computed, as one vector in scoring space: every one whose inputs
 * all have a combined value.
 */
export interface DerivedVector {
  /** In increasing order. */
  measurands: number[];
  values: Float64Array;
  /** J C J' of the inputs' own noises, without shared errors; row by row. */
  covariance: Float64Array;
  /** Of each value, carried through J; relative ones are multiplied out. */
  loadings: Loading[][];
}

/** What one hypothesis says of each measurand: an index of its roles, or null for left out. */
export type Roles = readonly (number | null)[];

/**
 * One scoring: a campaign and its sums, with all that has been worked out of them so far. Good
 * until a reading is added.
 */
export interface Workspace {
  frame: Frame;
  sums: Sums;
  marginals: Marginals;
  coupling: Map<number, number[]>;
  evidences: Map<string, LogIntegral>;
  derived: DerivedVector;
  /** Of measurements that are correlated with one another, the group by id. */
  correlationGroups: Map<string, number>;
  /** Measurands that something other than a draw ties together, whatever is said of them. */
  ties: number[][];
  general: Map<string, GeneralEvidence>;
  fits: Map<string, BlockChiSquare>;
}

/** A block's part of chi-square. */
export interface BlockChiSquare {
  chiSquare: number;
  /** Measurements with a value that it is over. */
  counted: number;
  /** Flat unknowns whose minimum lies inside their bounds: each costs a degree of freedom. */
  flatInside: number;
}

/** Roles that leave out all measurands but one. */
export function onlyMeasurand({ frame }: Workspace, measurand: number, role: number): Roles {
  return frame.measurands.map((_, m) => (m === measurand ? role : null));
}

/** The measurands that have a role and something that counts, in increasing order. */
export function measuredIn({ sums, derived }: Workspace, roles: Roles): number[] {
  const measured: number[] = [];
  roles.forEach((role, m) => {
    if (role === null) return;
    if (sums.measurands[m]!.counted > 0 || derived.measurands.includes(m)) measured.push(m);
  });
  return measured;
}

export function levelOf({ frame, sums }: Workspace, measurand: number, role: number): Level {
  const { centre } = sums.measurands[measurand]!;
  const said = frame.measurands[measurand]!.roles[role]!;
  if (said.kind !== "normal" && said.kind !== "uniform") {
    throw new TypeError(`a level of the role ${said.kind}`);
  }
  return { role: said, centre };
}
