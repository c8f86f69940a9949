import { CHANNEL } from "./append";
import type { Alongside } from "./append";
import { findCampaign } from "./campaigns";
import type { Store } from "./open-store";
import type { Queries } from "./queries";
import { writeStandings } from "./standings";
import type { Outcome, TimelineStep } from "./standings";

/** The engine's state and the size it stands at; null: the document of that size can't be scored. */
export type ScorerState = { size: number; state: string | null };

export type Scoring = {
  campaign: string;
  size: number;
  engine: string;
  outcome: Outcome;
  /** Steps since the last scoring; all of them where the state was built anew. */
  steps: TimelineStep[];
  stateVersion: number;
  state: ScorerState["state"];
};

/**
 * Keeps all that one scoring made, in one transaction, and tells it. Two scorers at one campaign do
 * no harm: the same size gives the same rows, and an older state never replaces a newer one.
 *
 * @param alongside what else the transaction writes: what webhooks are told of these standings
 */
export async function saveScoring(
  store: Store,
  scoring: Scoring,
  alongside: Alongside | null = null,
): Promise<void> {
  const { id: campaignId } = await findCampaign(store, scoring.campaign, store.db);
  const { size, engine, stateVersion, state } = scoring;
  const event = JSON.stringify({ campaign: scoring.campaign, size, what: "scored" });
  await store.sql.begin(async (tx) => {
    await writeStandings(tx, { campaignId, size, engine, ...scoring.outcome });
    await writeSteps(tx, campaignId, scoring);
    await tx`
      insert into scorer_states as s (campaign_id, engine, state_version, size, state)
      values (${campaignId}, ${engine}, ${stateVersion}, ${size}, ${state})
      on conflict (campaign_id, engine, state_version) do update
        set size = excluded.size, state = excluded.state where s.size < excluded.size`;
    await tx`
      delete from scorer_states where campaign_id = ${campaignId}
        and (engine <> ${engine} or state_version < ${stateVersion})`;
    await alongside?.(tx, campaignId);
    await tx`select pg_notify(${CHANNEL}, ${event})`;
  });
}

/** The state to go on from, or null where none is kept for this engine and state version. */
export async function readState(
  store: Store,
  input: { campaign: string; engine: string; stateVersion: number },
): Promise<ScorerState | null> {
  const { id } = await findCampaign(store, input.campaign, store.db);
  const [row] = await store.sql<ScorerState[]>`
    select size, state from scorer_states
    where campaign_id = ${id} and engine = ${input.engine}
      and state_version = ${input.stateVersion}`;
  return row ?? null;
}

async function writeSteps(
  tx: Queries,
  campaignId: number,
  { engine, steps }: Scoring,
): Promise<void> {
  if (steps.length === 0) return;
  await tx`
    insert into timeline_steps
      (campaign_id, engine, size, at, seq, kind, facilities, measurements)
    select ${campaignId}::int, ${engine}, s.size, s.at, s.seq, s.kind,
      array(select json_array_elements_text(s.facilities)), s.measurements
    from json_to_recordset(${JSON.stringify(
      steps.map(({ size, at, movedBy }) => ({ size, at, ...movedBy })),
    )}::text::json) as s(size int, at timestamptz, seq int, kind text, facilities json,
      measurements int)
    on conflict do nothing`;
  const points = steps.flatMap(({ size, points: each }) =>
    each.map((point, place) => ({ size, place, ...point })),
  );
  await tx`
    insert into timeline_points (campaign_id, engine, size, hypothesis, place, ln_evidence)
    select ${campaignId}::int, ${engine}, p.size, p.hypothesis, p.place, p."lnEvidence"
    from json_to_recordset(${JSON.stringify(points)}::text::json)
      as p(size int, hypothesis text, place int, "lnEvidence" double precision)
    on conflict do nothing`;
}
