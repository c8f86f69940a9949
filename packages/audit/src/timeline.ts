import type { LedgerRecord } from "@weighhouse/campaign/changes";
import { CampaignFold } from "@weighhouse/campaign/fold";
import type { Standings } from "@weighhouse/campaign/standings";
import type { Score } from "./checks/standings";
import { inClosedForm } from "./closed-form";

/** A hypothesis's ln evidence as of the first `size` entries. */
export type TimelineRow = {
  size: number;
  /** Time of the last of these entries. */
  at: string;
  hypothesis: string;
  /** Null for a likelihood of zero. */
  lnEvidence: number | null;
  lnEvidenceError: number;
};

const MOST_POINTS = 200;
const LEAST_POINTS = 10;
/** Measurements scored for all points together, at most: each point is a whole scoring. */
const MEASUREMENTS_SCORED = 100_000;
/** Where evidences are integrated numerically a scoring may take seconds. */
const POINTS_WHERE_NUMERICAL = 8;

/** Entries that move nobody's evidence. */
const STILL =
  /^(campaign\.|facility\.|team\.|remark\.|standings\.|reference\.|measurand\.proposed)/;

/**
 * The sizes at which the timeline is computed: ends of transactions that could have moved an
 * evidence, the last one always; evenly thinned where there are more than can be scored in a while.
 *
 * @param heads sizes of tree heads, increasing
 */
export function timelineSizes(
  records: readonly LedgerRecord[],
  heads: readonly number[],
  standings: Standings,
): number[] {
  const size = records.length;
  const first = records.findIndex(({ kind }) => kind === "hypothesis.registered");
  if (first < 0) return [];
  let before = 0;
  const moving = heads.filter((head) => {
    const moves = records.slice(before, head).some(({ kind }) => !STILL.test(kind));
    before = head;
    return moves && head > first && head < size;
  });
  return [...thinned(moving, pointsFor(standings) - 1), size];
}

function pointsFor({ hypotheses, measurements }: Standings): number {
  if (!inClosedForm(hypotheses)) return POINTS_WHERE_NUMERICAL;
  const affordable = Math.floor(MEASUREMENTS_SCORED / Math.max(1, measurements.counted));
  return Math.max(LEAST_POINTS, Math.min(MOST_POINTS, affordable));
}

/** At most so many of a list, evenly, its first and last among them. */
export function thinned<T>(list: readonly T[], most: number): T[] {
  if (list.length <= most) return [...list];
  if (most <= 1) return list.slice(-most);
  const step = (list.length - 1) / (most - 1);
  return Array.from({ length: most }, (_, index) => list[Math.round(index * step)] as T);
}

/**
 * Each hypothesis's ln evidence at each size: the entries up to it folded and scored. A size at
 * which nothing could be scored yet has no rows.
 *
 * @param standings as of the last size
 */
export function timelineOf(
  records: readonly LedgerRecord[],
  sizes: readonly number[],
  { standings, score }: { standings: Standings; score: Score },
): TimelineRow[] {
  const fold = new CampaignFold();
  return sizes.flatMap((size) => {
    for (const record of records.slice(fold.size, size)) fold.apply(record);
    const { at } = records[size - 1] as LedgerRecord;
    if (size === records.length) return rowsOf({ size, at }, standings);
    const scored = score(fold.document(), { asOf: null });
    return scored.ok ? rowsOf({ size, at }, scored.value) : [];
  });
}

function rowsOf(point: { size: number; at: string }, { hypotheses }: Standings): TimelineRow[] {
  // By key, so that a change of rank moves no row.
  return [...hypotheses]
    .sort((a, b) => (a.key < b.key ? -1 : 1))
    .map(({ key, lnEvidence, lnEvidenceError }) => ({
      ...point,
      hypothesis: key,
      lnEvidence,
      lnEvidenceError,
    }));
}
