import type { LogIntegral } from "@weighhouse/numerics/box";
import type { BlockEvidence, BlockProblem } from "../block/problem";
import type { Role } from "../frame";
import type { Told } from "../readings";

/** One equation about a measurand: a reading, a group of readings, or a derived value. */
export interface Row {
  measurand: number;
  /** Null for a group's mean and for a derived value. */
  told: Told | null;
  /** Minus the measurand's centre; of forms without one number 0. */
  observed: number;
  /** With scatter and the role's noise. */
  variance: number;
  /** The part of it that isn't the reading's own. */
  extra: number;
  draws: readonly number[];
  loadings: readonly number[];
  relative: readonly boolean[];
  conditions: readonly number[];
  /** Of a row of its role's triangular factor; null where it has conditions of its own. */
  factored: FactoredRow | null;
  /** Of a measurement that is correlated with others. */
  id: string | null;
  /** How many measurements it stands for. */
  count: number;
}

/** Coefficients of the columns of the role's fixed design. */
export interface FactoredRow {
  coefficients: Float64Array;
  /** It stands for readings where what is expected has no value. */
  impossible: boolean;
}

/** A measurand's rows under one role, with what no unknown moves. */
export interface RoleRows {
  rows: Row[];
  /** ln of the factor that a group's scatter about its own mean brings. */
  ln: number;
  /** Its part of chi-square. */
  squares: number;
  /** Measurements that no row's count has. */
  counted: number;
}

/** A measurand with what is said of it. */
export interface Part {
  measurand: number;
  role: Role;
  /** Whether the role is the measurand's reference. */
  reference: boolean;
}

/** Rows that hang together through unknowns; in the order of parts, and of readings in them. */
export interface Component {
  parts: Part[];
  rows: Row[];
}

export interface Components {
  components: Component[];
  /** What no unknown moves: see RoleRows. */
  ln: number;
  squares: number;
  counted: number;
}

/** A block as the kernel takes it, with where its unknowns are. */
export interface BuiltBlock {
  problem: BlockProblem;
  rows: readonly Row[];
  parts: readonly Part[];
  /** Place of an unknown by its key: among the linear or the outer ones. */
  placeOf(key: string): number | undefined;
  isLinear(key: string): boolean;
}

/** A component with its posterior. */
export interface Scored {
  built: BuiltBlock;
  evidence: BlockEvidence;
}

export interface GeneralEvidence extends LogIntegral {
  scored: Scored[];
}
