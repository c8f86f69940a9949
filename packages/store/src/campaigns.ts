import { eq, sql } from "drizzle-orm";
import { instantFromPostgres } from "./instant";
import type { Database, Store } from "./open-store";
import { campaigns, tips } from "./schema/tables";
import { StoreError } from "./store-error";

export type Visibility = "public" | "members";

export type CampaignRow = {
  id: number;
  key: string;
  ledger: string;
  clock: "real" | "simulated";
  visibility: Visibility;
  size: number;
  lastAt: string;
};

/**
 * The campaign's row and tip.
 *
 * @param db what to ask: writers ask the primary, since a replica may not have the campaign yet
 * @throws {StoreError} `no-such-campaign`
 */
export async function findCampaign(
  store: Store,
  key: string,
  db: Database = store.readDb,
): Promise<CampaignRow> {
  const [row] = await db
    .select({
      id: campaigns.id,
      key: campaigns.key,
      ledger: campaigns.ledger,
      clock: campaigns.clock,
      visibility: campaigns.visibility,
      size: tips.size,
      lastAt: tips.lastAt,
    })
    .from(campaigns)
    .innerJoin(tips, eq(tips.campaignId, campaigns.id))
    .where(eq(campaigns.key, key));
  if (row === undefined) {
    throw new StoreError("no-such-campaign", `found no campaign ${JSON.stringify(key)}`);
  }
  return row;
}

export type CampaignSummary = {
  key: string;
  title: string;
  summary: string | null;
  visibility: Visibility;
  clock: "real" | "simulated";
  size: number;
  teams: number;
  hypotheses: number;
  measurements: number;
  registrationCloses: string | null;
  dataCloses: string | null;
  lastMeasurementAt: string | null;
  /** From the latest standings of that engine; null where nothing is scored or nobody is ranked. */
  leader: {
    hypothesis: string;
    title: string;
    posterior: number | null;
    /** log10 Bayes factor against rank 2; null without one. */
    log10Lead: number | null;
    runnerUp: string | null;
    size: number;
  } | null;
};

type SummaryRow = Omit<CampaignSummary, "leader"> & {
  leaderKey: string | null;
  leaderTitle: string | null;
  posterior: number | null;
  log10Lead: number | null;
  runnerUp: string | null;
  scoredSize: number | null;
};

/**
 * Campaigns that the user may see, the one that moved last first: public ones and those he is a
 * member of (null: public ones).
 */
export async function listCampaigns(
  store: Store,
  { userId, engine }: { userId: string | null; engine: string },
): Promise<CampaignSummary[]> {
  const rows = await store.readDb.execute<SummaryRow>(sql`
    select c.key, main.content->>'title' as title, main.content->>'summary' as summary,
      c.visibility, c.clock, t.size,
      main.content->>'registrationCloses' as "registrationCloses",
      main.content->>'dataCloses' as "dataCloses",
      (select count(*)::int from parts p
        where p.campaign_id = c.id and p.part = 'team' and p.to_size is null) as teams,
      (select count(*)::int from parts p
        where p.campaign_id = c.id and p.part = 'hypothesis' and p.to_size is null) as hypotheses,
      (select count(*)::int from measurements x
        where x.campaign_id = c.id and x.to_size is null and not x.withdrawn) as measurements,
      (select max(x.posted_at) from measurements x
        where x.campaign_id = c.id) as "lastMeasurementAt",
      s.leader as "leaderKey", s.leader_posterior as posterior, s.log10_lead as "log10Lead",
      s.runner_up as "runnerUp", s.size as "scoredSize",
      (select p.content->>'title' from parts p where p.campaign_id = c.id
        and p.part = 'hypothesis' and p.key = s.leader and p.to_size is null) as "leaderTitle"
    from campaigns c
    join tips t on t.campaign_id = c.id
    join parts main on main.campaign_id = c.id and main.part = 'campaign' and main.to_size is null
    left join memberships m on m.campaign_id = c.id and m.user_id = ${userId}
    left join lateral (
      select size, leader, runner_up, leader_posterior, log10_lead from standings
      where campaign_id = c.id and engine = ${engine} order by size desc limit 1
    ) s on true
    where c.visibility = 'public' or m.member is not null
    order by t.last_at desc, c.key`);
  return rows.map(summaryOf);
}

function summaryOf(row: SummaryRow): CampaignSummary {
  const { leaderKey, leaderTitle, posterior, log10Lead, runnerUp, scoredSize, ...rest } = row;
  return {
    ...rest,
    lastMeasurementAt:
      row.lastMeasurementAt === null ? null : instantFromPostgres(row.lastMeasurementAt),
    leader:
      leaderKey === null
        ? null
        : {
            hypothesis: leaderKey,
            title: leaderTitle ?? leaderKey,
            posterior,
            log10Lead,
            runnerUp,
            size: scoredSize ?? 0,
          },
  };
}
