import type { Problem } from "@weighhouse/campaign/problem";
import type { Standings } from "@weighhouse/campaign/standings";
import { and, asc, desc, eq, lte } from "drizzle-orm";
import { findCampaign } from "./campaigns";
import type { Store } from "./open-store";
import type { Queries } from "./queries";
import { standings, timelinePoints, timelineSteps } from "./schema/tables";

/** What an engine made of a size: standings, or why the document can't be scored. */
export type Scored = {
  size: number;
  engine: string;
  scoredAt: string;
} & Outcome;

export type Outcome =
  { standings: Standings; problems: null } | { standings: null; problems: Problem[] };

/** Standings of a size, or the latest scored; null: not scored yet by that engine. */
export async function readStandings(
  store: Store,
  input: { campaign: string; size: number | "latest"; engine: string },
): Promise<Scored | null> {
  const { id } = await findCampaign(store, input.campaign);
  const [row] = await store.readDb
    .select()
    .from(standings)
    .where(
      and(
        eq(standings.campaignId, id),
        eq(standings.engine, input.engine),
        input.size === "latest" ? undefined : eq(standings.size, input.size),
      ),
    )
    .orderBy(desc(standings.size))
    .limit(1);
  if (row === undefined) return null;
  const { size, engine, scoredAt, document, problems } = row;
  const outcome: Outcome =
    document === null
      ? { standings: null, problems: JSON.parse(problems ?? "[]") as Problem[] }
      : { standings: JSON.parse(document) as Standings, problems: null };
  return { size, engine, scoredAt, ...outcome };
}

/** Keeps what was made of a size: asked for once, read ever after. */
export async function saveStandings(
  store: Store,
  input: { campaign: string; size: number; engine: string } & (
    { standings: Standings } | { problems: Problem[] }
  ),
): Promise<void> {
  const { id: campaignId } = await findCampaign(store, input.campaign, store.db);
  await writeStandings(store.sql, {
    campaignId,
    size: input.size,
    engine: input.engine,
    ...("standings" in input
      ? { standings: input.standings, problems: null }
      : { standings: null, problems: input.problems }),
  });
}

export async function writeStandings(
  sql: Queries,
  row: { campaignId: number; size: number; engine: string } & Outcome,
): Promise<void> {
  const document = row.standings === null ? null : JSON.stringify(row.standings);
  const problems = row.problems === null ? null : JSON.stringify(row.problems);
  const lead = leadOf(row.standings);
  await sql`
    insert into standings (campaign_id, size, engine, document, problems,
      leader, runner_up, leader_posterior, log10_lead)
    values (${row.campaignId}, ${row.size}, ${row.engine}, ${document}, ${problems}::text::json,
      ${lead.leader}, ${lead.runnerUp}, ${lead.posterior}, ${lead.log10Lead})
    on conflict (campaign_id, size, engine) do update set
      scored_at = excluded.scored_at, document = excluded.document, problems = excluded.problems,
      leader = excluded.leader, runner_up = excluded.runner_up,
      leader_posterior = excluded.leader_posterior, log10_lead = excluded.log10_lead`;
}

/** A transaction that changed measurements or hypotheses, and where it left every hypothesis. */
export type TimelineStep = {
  /** Size at the end of the transaction. */
  size: number;
  at: string;
  /** What moved it: the transaction's first entry that changed measurements or hypotheses. */
  movedBy: { seq: number; kind: string; facilities: string[]; measurements: number };
  points: { hypothesis: string; lnEvidence: number | null }[];
};

/** ln evidence over time, up to a size; the latest unless given. */
export async function readTimeline(
  store: Store,
  { campaign, engine, size }: { campaign: string; engine: string; size?: number | undefined },
): Promise<TimelineStep[]> {
  const { id, size: latest } = await findCampaign(store, campaign);
  const steps = await store.readDb
    .select()
    .from(timelineSteps)
    .where(
      and(
        eq(timelineSteps.campaignId, id),
        eq(timelineSteps.engine, engine),
        lte(timelineSteps.size, size ?? latest),
      ),
    )
    .orderBy(asc(timelineSteps.size));
  const points = await store.readDb
    .select()
    .from(timelinePoints)
    .where(
      and(
        eq(timelinePoints.campaignId, id),
        eq(timelinePoints.engine, engine),
        lte(timelinePoints.size, size ?? latest),
      ),
    )
    .orderBy(asc(timelinePoints.size), asc(timelinePoints.place));
  const bySize = new Map<number, TimelineStep["points"]>();
  for (const { size: at, hypothesis, lnEvidence } of points) {
    bySize.set(at, [...(bySize.get(at) ?? []), { hypothesis, lnEvidence }]);
  }
  return steps.map(({ size: at, at: time, seq, kind, facilities, measurements }) => ({
    size: at,
    at: time,
    movedBy: { seq, kind, facilities, measurements },
    points: bySize.get(at) ?? [],
  }));
}

/** Who leads, for the list of campaigns. With nothing counted nobody does: ranks are by name then. */
function leadOf(document: Standings | null) {
  const [first, second] = document?.hypotheses ?? [];
  if (document === null || first === undefined || document.measurements.counted === 0) {
    return { leader: null, runnerUp: null, posterior: null, log10Lead: null };
  }
  const behind = second?.log10BayesFactor ?? null;
  return {
    leader: first.key,
    runnerUp: second?.key ?? null,
    posterior: first.posterior,
    // Against rank 1 it is negative or zero.
    log10Lead: behind === null ? null : Math.abs(behind),
  };
}
