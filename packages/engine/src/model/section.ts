import type { MeasurandFrame } from "../frame";
import type { Assembly } from "./assembly";
import type { Part, Row } from "./block-parts";
import type { OpenRows } from "./row-kinds";

/** A part's rows in a block that is being put together: `rows[i]` is the block's row `begin + i`. */
export interface Section {
  assembly: Assembly;
  open: OpenRows;
  part: Part;
  frame: MeasurandFrame;
  centre: number;
  begin: number;
  rows: readonly Row[];
  /** Per hypothesis, the parameters that are linear unknowns. */
  linear: ReadonlySet<number>;
}

/** What the rows are expected to be in the observable's unit, the tolerance left out. */
export interface Expected {
  values: Float64Array;
  /** `values` is filled anew whenever the block is looked at in another place. */
  moving: boolean;
  /** Of a polynomial: its coefficients' unknowns. Then `values` is its constant part. */
  coefficients: readonly number[];
}

export function fixedValue(count: number, value: number): Expected {
  return { values: new Float64Array(count).fill(value), moving: false, coefficients: [] };
}

export function loadsRelative(rows: readonly Row[]): boolean {
  return rows.some(({ relative }) => relative.includes(true));
}
