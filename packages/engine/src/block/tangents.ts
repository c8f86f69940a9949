import type { BentRow } from "./layout";
import type { BentState, Workbench } from "./workbench";

/** A slope of less than this, in the row's own scale, is none. */
const FLAT = 1e-9;
/** Of the row's scale: over which a slope is taken, and how hard a pinned row is held. */
const STEP = 1e-5;
const HELD = 1e-6;

/** Each bent row at a place to begin from. */
export function startTangents(bench: Workbench, placeOf: (row: BentRow) => number): void {
  for (const row of bench.layout.bent) {
    bench.bent.set(row.row, { mu: placeOf(row), pin: NaN, lead: 0 });
    setTangent(bench, row);
  }
}

/**
 * Replaces each row that isn't linear in mu by its tangent at the fit: the normal row whose
 * residual there, and its slope, are the same (Gauss-Newton). A row that would cross a kink from
 * which its square rises on both sides is pinned to it, for as long as the others' pull is between
 * the two slopes.
 *
 * @param fittedOf what a fit makes of a row's mu
 * @returns how far one moved, in its own scale
 */
export function moveTangents(
  bench: Workbench,
  fittedOf: (row: number) => number,
  share: number,
): number {
  let moved = 0;
  for (const row of bench.layout.bent) {
    const state = bench.bent.get(row.row)!;
    const fitted = fittedOf(row.row);
    const before = state.mu;
    if (Number.isNaN(state.pin)) moveFree(row, state, before + share * (fitted - before));
    else movePinned(bench, row, fitted);
    const step = Number.isNaN(state.pin) ? state.mu - before : fitted - before;
    moved = Math.max(moved, Math.abs(step) / row.factor.scale);
    setTangent(bench, row);
  }
  return moved;
}

function moveFree(row: BentRow, state: BentState, target: number): void {
  const [from, to] = [Math.min(state.mu, target), Math.max(state.mu, target)];
  const crossed = row.factor.breaks.filter((at) => at > from && at < to);
  // The first one on the way.
  if (target < state.mu) crossed.reverse();
  const kink = crossed.find((at) => {
    const { left, right } = slopesAt(row, at);
    return right - left > STEP * (Math.abs(left) + Math.abs(right)) * 10;
  });
  state.mu = kink ?? target;
  if (kink !== undefined) Object.assign(state, { pin: kink, lead: 0 });
}

function movePinned(bench: Workbench, row: BentRow, fitted: number): void {
  const state = bench.bent.get(row.row)!;
  const { pin } = state;
  const drawn = pin + state.lead - fitted;
  // What all else would gain or lose by this row's moving on.
  const others = (2 * drawn) / (HELD * row.factor.scale) ** 2;
  const { left, right } = slopesAt(row, pin);
  state.lead += pin - fitted;
  const release = left + others > 0 ? -1 : right + others < 0 ? 1 : 0;
  if (release === 0) return;
  Object.assign(state, { pin: NaN, lead: 0, mu: pin + release * 3 * STEP * row.factor.scale });
}

/** Slopes of the residual's square on the two sides of a place. */
function slopesAt({ residual, factor }: BentRow, at: number): { left: number; right: number } {
  const h = STEP * factor.scale;
  const middle = residual(at) ** 2;
  // Parabolas through three points of a side.
  const right = (4 * residual(at + h) ** 2 - residual(at + 2 * h) ** 2 - 3 * middle) / (2 * h);
  const left = (3 * middle - 4 * residual(at - h) ** 2 + residual(at - 2 * h) ** 2) / (2 * h);
  return { left, right };
}

function setTangent({ bent, state, evaluated }: Workbench, bentRow: BentRow): void {
  const { row, factor, residual } = bentRow;
  const { mu, pin, lead } = bent.get(row)!;
  const base = evaluated.base[row]!;
  if (!Number.isNaN(pin)) {
    state.residual[row] = pin + lead - base;
    state.variance[row] = (HELD * factor.scale) ** 2;
    return;
  }
  const h = STEP * factor.scale;
  const kinked = factor.breaks.find((at) => Math.abs(at - mu) < h);
  const below = kinked === undefined || mu <= kinked ? h : 0;
  const above = kinked === undefined || mu > kinked ? h : 0;
  const slope = (residual(mu + above) - residual(mu - below)) / (above + below);
  const flat = FLAT / factor.scale;
  const steep = Math.max(Math.abs(slope), flat);
  state.variance[row] = 1 / (steep * steep);
  // Where it doesn't move with mu, the row says nothing, but what it costs is kept.
  state.residual[row] = mu - base - residual(mu) / (Math.abs(slope) > flat ? slope : -flat);
}
