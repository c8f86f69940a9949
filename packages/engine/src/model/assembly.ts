import type {
  AtFit,
  BlockProblem,
  Evaluated,
  LinearUnknown,
  OuterUnknown,
  SparseDesign,
} from "../block/problem";
import { ownSlots, type Frame } from "../frame";

/** Fills what it is about from the scopes; false where an expression has no value. */
export type Fill = (base: Float64Array) => boolean;

/** A linear unknown's column: what hangs on nothing, and what is filled anew each time. */
interface Column {
  rows: number[];
  values: number[];
  fills: ((column: Float64Array) => void)[];
}

/** The share of a fitted level that a draw loads, where a polynomial is among what it loads. */
interface Share {
  coefficient: Float64Array;
  level: Float64Array;
  of: Set<number>;
  fills: (() => void)[];
}

/** A block while it is being put together: its unknowns by key, and their columns. */
export class Assembly {
  readonly base: Float64Array;
  readonly linear: LinearUnknown[] = [];
  readonly outer: OuterUnknown[] = [];
  readonly correlations: { first: number; second: number; value: number }[] = [];
  /** Values of the outer unknowns, while the block is evaluated. */
  values: Float64Array = new Float64Array();
  /** An expression that hangs on nothing has no value. */
  impossible = false;
  private readonly places = new Map<string, number>();
  private readonly linearKeys = new Set<string>();
  private readonly columns: Column[] = [];
  private readonly fills: Fill[] = [];
  private readonly shares = new Map<number, Share>();
  /** Per hypothesis, its parameters and columns; linear parameters stand where they count from. */
  private readonly scopes = new Map<number, Float64Array>();
  private readonly moves: ((scenario: number) => void)[] = [];

  constructor(
    readonly frame: Frame,
    readonly count: number,
  ) {
    this.base = new Float64Array(count);
  }

  addLinear(key: string, unknown: LinearUnknown): number {
    const there = this.places.get(key);
    if (there !== undefined) return there;
    const place = this.linear.push(unknown) - 1;
    this.columns.push({ rows: [], values: [], fills: [] });
    this.linearKeys.add(key);
    this.places.set(key, place);
    return place;
  }

  addOuter(key: string, make: () => OuterUnknown): number {
    const there = this.places.get(key);
    if (there !== undefined) return there;
    const place = this.outer.push(make()) - 1;
    this.places.set(key, place);
    return place;
  }

  placeOf(key: string): number | undefined {
    return this.places.get(key);
  }

  isLinear(key: string): boolean {
    return this.linearKeys.has(key);
  }

  /** Adds to a column that hangs on nothing. */
  load(unknown: number, row: number, value: number): void {
    const { rows, values } = this.columns[unknown]!;
    rows.push(row);
    values.push(value);
  }

  /** Adds to a column what has to be filled anew each time. */
  loadMoving(unknown: number, fill: (column: Float64Array) => void): void {
    this.columns[unknown]!.fills.push(fill);
  }

  /** Rows of what is expected that hang on something. */
  expect(fill: Fill): void {
    this.fills.push(fill);
  }

  /** Done whenever the block is looked at in another place or scenario, before all else. */
  move(step: (scenario: number) => void): void {
    this.moves.push(step);
  }

  scopeOf(hypothesis: number): Float64Array {
    let scope = this.scopes.get(hypothesis);
    if (scope === undefined) {
      scope = new Float64Array(ownSlots(this.frame.hypotheses[hypothesis]!));
      this.scopes.set(hypothesis, scope);
    }
    return scope;
  }

  /** Moves a draw's column among those that are a share of a fitted level. */
  shareOf(unknown: number): Share {
    let share = this.shares.get(unknown);
    if (share === undefined) {
      const { count } = this;
      const coefficient = new Float64Array(count);
      share = { coefficient, level: new Float64Array(count), of: new Set(), fills: [] };
      this.shares.set(unknown, share);
    }
    return share;
  }

  moveTo(outer: Float64Array, scenario: number): void {
    this.values = outer;
    for (const step of this.moves) step(scenario);
  }

  parts(): Pick<BlockProblem, "design" | "varying" | "evaluate" | "atFit"> {
    const varying = this.columns.flatMap(({ fills }, k) => (fills.length > 0 ? [k] : []));
    const shares = [...this.shares.values()];
    const atFit = [...this.shares].map(([unknown, { coefficient, level, of }]): AtFit => ({
      unknown,
      coefficient,
      level,
      of: [...of],
    }));
    const evaluate = (outer: Float64Array, scenario: number, into: Evaluated): boolean => {
      if (this.impossible) return false;
      into.base.set(this.base);
      this.moveTo(outer, scenario);
      for (const fill of this.fills) if (!fill(into.base)) return false;
      varying.forEach((unknown, v) => this.fillColumn(unknown, into.columns[v]!));
      for (const { fills } of shares) for (const fill of fills) fill();
      return true;
    };
    return { design: this.design(), varying, evaluate, atFit };
  }

  private fillColumn(unknown: number, column: Float64Array): void {
    const { rows, values, fills } = this.columns[unknown]!;
    column.fill(0);
    rows.forEach((row, i) => (column[row]! += values[i]!));
    for (const fill of fills) fill(column);
  }

  private design(): SparseDesign {
    const start = new Int32Array(this.count + 1);
    const fixed = this.columns.map((column) => (column.fills.length > 0 ? null : column));
    for (const one of fixed) for (const row of one?.rows ?? []) start[row + 1]! += 1;
    for (let i = 0; i < this.count; i += 1) start[i + 1]! += start[i]!;
    const next = start.slice();
    const column = new Int32Array(start[this.count]!);
    const value = new Float64Array(start[this.count]!);
    fixed.forEach((one, k) => {
      one?.rows.forEach((row, i) => {
        column[next[row]!] = k;
        value[next[row]!] = one.values[i]!;
        next[row]! += 1;
      });
    });
    return { start, column, value };
  }
}
