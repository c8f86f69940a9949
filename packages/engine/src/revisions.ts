import type { Measurement } from "@weighhouse/campaign/document";
import type { Problem, Result } from "@weighhouse/campaign/problem";
import type { EngineState } from "./engine-state";
import type { Frame } from "./frame";
import { unscorableParts } from "./model/unscorable";
import { mayAddUnknowns, readCounted } from "./read-counted";
import type { Reading } from "./readings";
import { restoreState, serialiseState } from "./state-text";
import { addReading, type Sums } from "./sums";
import { centreAnew, empty, takeOut } from "./take-out";
import { closeUp, forgetMeasurement, noteAt } from "./tally";

/** A measurement of the state that another stands in for (corrected, set aside), or none (withdrawn). */
export interface Revision {
  /** In the document's measurements, before any of the revisions. */
  place: number;
  before: Measurement;
  after: Measurement | null;
}

/**
 * Takes measurements out, and puts what they became in their places, O(k^2) each. The state given is
 * used up, but where it is refused, and where the answer is null: then it is still good.
 *
 * The measurands in `worn` have to be made anew by `remakeMeasurands` before the state is used.
 *
 * @param keep `accuracy`: a reading is taken out of the sums, and only those are worn that too many
 *   digits would be lost of (take-out.ts). `bytes`: all are worn that anything is taken out of, so that
 *   the state is the one that the document gives, to the last bit, whatever its history.
 * @returns null where only `createState` will do: a correlated measurement is withdrawn, one that was
 *   known before all others changes, or (for `bytes`) one that the order of unknowns hangs on
 */
export function reviseMeasurements(
  state: EngineState,
  revisions: readonly Revision[],
  keep: "accuracy" | "bytes" = "accuracy",
): Result<{ state: EngineState; worn: string[] }> | null {
  if (revisions.some((one) => !isRevisable(state, one))) return null;
  const before = readAll(state, revisions, (one) => one.before);
  const after = readAll(state, revisions, (one) => one.after);
  if (!before.ok || !after.ok) {
    return { ok: false, problems: [before, after].flatMap((one) => (one.ok ? [] : one.problems)) };
  }
  const pairs = revisions.map((revision, i): Pair => {
    return { ...revision, old: before.value[i]!, now: after.value[i]! };
  });
  if (keep === "bytes" && pairs.some((pair) => movesOrder(state, pair))) return null;
  if (pairs.some(({ now }) => mayAddUnknowns(state, now))) {
    const copy = restoreState(serialiseState(state))!;
    const { worn } = applied(copy, pairs, keep);
    const problems = worn.length > 0 ? [] : unscorableParts(copy);
    if (problems.length > 0) return { ok: false, problems };
    if (worn.length > 0) return null;
  }
  return { ok: true, value: applied(state, pairs, keep) };
}

/** A revision as read. */
interface Pair extends Revision {
  old: Reading | null;
  now: Reading | null;
}

/** Whether draws or patterns would come up in another order in the document as it is then. */
function movesOrder({ sums }: EngineState, { before, old, now }: Pair): boolean {
  if (sums.firsts.has(before.id)) return true;
  if (now === null || now.loadings.length === 0) return false;
  return JSON.stringify(now.loadings) !== JSON.stringify(old?.loadings);
}

function isRevisable({ frame, tally }: EngineState, { before, after }: Revision): boolean {
  if (after === null && frame.correlated.has(before.id)) return false;
  const dates = tally.dates[frame.measurandIndex.get(before.measurand) ?? -1];
  return before.knownSince === null || before.knownSince !== dates?.known;
}

function readAll(
  { frame }: EngineState,
  revisions: readonly Revision[],
  which: (one: Revision) => Measurement | null,
): Result<(Reading | null)[]> {
  const readings: (Reading | null)[] = [];
  const problems: Problem[] = [];
  for (const revision of revisions) {
    const measurement = which(revision);
    const read = measurement === null ? null : readCounted(frame, measurement, revision.place);
    if (read !== null && !read.ok) problems.push(...read.problems);
    readings.push(read !== null && read.ok ? read.value : null);
  }
  return problems.length > 0 ? { ok: false, problems } : { ok: true, value: readings };
}

function applied(
  state: EngineState,
  pairs: readonly Pair[],
  keep: "accuracy" | "bytes",
): { state: EngineState; worn: string[] } {
  const { frame, sums, tally } = state;
  const worn = new Set<number>();
  const touched = new Set<number>();
  for (const { place, before, after, old, now } of pairs) {
    forgetMeasurement(tally, frame, before, old, place);
    if (after !== null) noteAt(tally, frame, after, now, place);
    for (const reading of [old, now]) if (reading !== null) touched.add(reading.measurand);
    if (exchange(sums, frame, { old, now })) worn.add(old!.measurand);
  }
  const left = pairs.flatMap(({ place, after }) => (after === null ? [place] : []));
  closeUp(
    tally,
    left.toSorted((a, b) => a - b),
  );
  for (const measurand of touched) {
    centreAnew(sums, measurand);
    if (keep === "bytes") worn.add(measurand);
  }
  const keys = [...worn].sort((a, b) => a - b).map((m) => frame.measurands[m]!.key);
  return { state, worn: keys };
}

/** Whether the old one's measurand is worn. One that is kept takes the place of the one before. */
function exchange(
  sums: Sums,
  frame: Frame,
  { old, now }: { old: Reading | null; now: Reading | null },
): boolean {
  const kept = old === null ? [] : sums.measurands[old.measurand]!.kept;
  const at = kept.findIndex(({ id }) => id === old?.id);
  const { worn } = old === null ? { worn: false } : takeOut(sums, old, frame);
  if (now !== null) {
    const place = now.measurand === old?.measurand && at >= 0 ? at : null;
    addReading(sums, now, frame, place);
  }
  return worn;
}

/**
 * Makes the sums of some measurands anew.
 *
 * @param left all measurements of the document as it is now that are of these measurands, in its order
 */
export function remakeMeasurands(
  state: EngineState,
  keys: readonly string[],
  left: readonly Measurement[],
): EngineState {
  const { frame, sums } = state;
  for (const key of keys) empty(sums, frame.measurandIndex.get(key)!);
  for (const measurement of left) {
    if (!keys.includes(measurement.measurand)) continue;
    // Each has been read before, and was right.
    const read = readCounted(frame, measurement, 0);
    if (read.ok && read.value !== null) addReading(sums, read.value, frame);
  }
  return state;
}
