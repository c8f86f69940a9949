import { noisePlanOf, type NoisePlan } from "./covariance";
import type { Layout } from "./layout";
import { priorRowsOf, type PriorRows } from "./prior-rows";
import type { BlockRefusal } from "./problem";

/** Where a row that isn't linear in mu stands. */
export interface BentState {
  mu: number;
  /** The kink that it is held at, or NaN. */
  pin: number;
  /** How far beyond the kink it has to be drawn to stay there. */
  lead: number;
}

/** What is worked out once for a block, and the room to work in. */
export interface Workbench {
  layout: Layout;
  plan: NoisePlan;
  prior: PriorRows;
  evaluated: { base: Float64Array; columns: Float64Array[] };
  state: { residual: Float64Array; variance: Float64Array; columns: Float64Array[] };
  /** Where rows that aren't linear in mu are replaced by their tangents, by row. */
  bent: Map<number, BentState>;
  /** Whether variances and loadings are those of a fit before. */
  settled: boolean;
  /** To what share fixed points have to settle; as far as they can where it isn't given. */
  settledTo?: number;
  /** What has been done, in units of work.ts: the same for the same input, as time isn't. */
  work: number;
}

export function workbenchOf(
  layout: Layout,
): { ok: true; bench: Workbench } | { ok: false; refusal: BlockRefusal } {
  const { rows, varying, atFit } = layout.problem;
  const prior = priorRowsOf(layout);
  if (!prior.ok)
    return { ok: false, refusal: { kind: "singular", rows: rowsOf(layout, prior.unknowns) } };
  const columnOf = () => new Float64Array(rows.count);
  const moving = varying.map(columnOf);
  const bench: Workbench = {
    layout,
    plan: noisePlanOf(layout),
    prior: prior.prior,
    evaluated: { base: columnOf(), columns: moving },
    state: {
      residual: columnOf(),
      variance: rows.variance.slice(),
      columns: [...moving, ...atFit.map(columnOf)],
    },
    bent: new Map(),
    settled: false,
    work: 0,
  };
  return { ok: true, bench };
}

/** Every row that has one of these unknowns. */
function rowsOf(
  { problem, place, start, position }: Layout,
  unknowns: readonly number[],
): number[] {
  const wanted = new Set(unknowns.map((k) => place[k]!));
  const found: number[] = [];
  for (let i = 0; i < problem.rows.count; i += 1) {
    if (position.subarray(start[i]!, start[i + 1]!).some((p) => wanted.has(p))) found.push(i);
  }
  return found;
}
