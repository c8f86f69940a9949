import type { Standings, VerdictWord } from "@weighhouse/campaign/standings";

/**
 * What a webhook was last told: of each hypothesis the log10 Bayes factor against the leader, and
 * each verdict under `hypothesis/measurand`. Null: the likelihood is zero.
 */
export type Told = {
  hypotheses: Record<string, number | null>;
  verdicts: Record<string, VerdictWord>;
};

/** What a webhook is to be told; `movedBy` null: no moves. */
export type Wants = { movedBy: number | null; turned: boolean };

export type News = {
  moved: {
    hypothesis: string;
    log10BayesFactor: { from: number | null; to: number | null };
  }[];
  turned: {
    hypothesis: string;
    measurand: string;
    verdict: { from: VerdictWord; to: VerdictWord };
  }[];
};

/** Everything as it stands, told or not: where a webhook begins. */
export function toldNow(standings: Standings): Told {
  const { hypotheses, verdicts } = standings;
  return {
    hypotheses: Object.fromEntries(hypotheses.map((one) => [one.key, one.log10BayesFactor])),
    verdicts: Object.fromEntries(verdicts.map((one) => [placeOf(one), one.verdict])),
  };
}

/**
 * What moved since a webhook was last told, and what it has been told once this is.
 *
 * A hypothesis has moved when its log10 Bayes factor against the leader is more than `movedBy` away
 * from the one last told of it, also where several small steps led there; to or from a likelihood of
 * zero is more than any number. A verdict has turned when its word is another. What is new since
 * (a hypothesis, a prediction) is where the next comparison begins, and no news itself.
 */
export function newsSince(
  told: Told,
  standings: Standings,
  { movedBy, turned }: Wants,
): { news: News; told: Told } {
  const now = toldNow(standings);
  const moved = standings.hypotheses
    .map(({ key, log10BayesFactor: to }) => ({ key, from: told.hypotheses[key], to }))
    .filter((one): one is { key: string; from: number | null; to: number | null } => {
      return movedBy !== null && one.from !== undefined && distance(one.from, one.to) > movedBy;
    });
  const turns = standings.verdicts
    .map((row) => ({ row, from: told.verdicts[placeOf(row)] }))
    .filter(({ row, from }) => turned && from !== undefined && from !== row.verdict);
  const movedNow = new Set(moved.map(({ key }) => key));
  const kept = Object.entries(now.hypotheses).map(([key, to]) => [
    key,
    movedNow.has(key) || told.hypotheses[key] === undefined ? to : told.hypotheses[key],
  ]);
  return {
    news: {
      moved: moved.map(({ key, from, to }) => ({
        hypothesis: key,
        log10BayesFactor: { from, to },
      })),
      turned: turns.map(({ row, from }) => ({
        hypothesis: row.hypothesis,
        measurand: row.measurand,
        verdict: { from: from!, to: row.verdict },
      })),
    },
    told: { hypotheses: Object.fromEntries(kept), verdicts: now.verdicts },
  };
}

export function isNews({ moved, turned }: News): boolean {
  return moved.length > 0 || turned.length > 0;
}

function distance(from: number | null, to: number | null): number {
  if (from === null || to === null) return from === to ? 0 : Infinity;
  return Math.abs(to - from);
}

function placeOf({ hypothesis, measurand }: { hypothesis: string; measurand: string }): string {
  return `${hypothesis}/${measurand}`;
}
