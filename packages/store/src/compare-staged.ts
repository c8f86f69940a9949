import { differingFields } from "./post-measurements";
import type { Conflict } from "./post-measurements";
import { findCampaign } from "./campaigns";
import type { Store } from "./open-store";
import type { Queries } from "./queries";
import { insertStagedEntries, stagedEntry } from "./stage-rows";
import type { EntryRow } from "./stage-rows";
import type { Upload } from "./uploads";

export type FateCounts = { alreadyThere: number; conflict: number; repeated: number };

const ROWS_AT_A_TIME = 1000;

/**
 * Compares what is staged with the campaign as it is, and the rows among themselves, by joins; then
 * takes the rows that are there already out of their entries. Nothing is locked meanwhile: the size
 * that is returned says up to where was looked.
 */
export async function compareStaged(
  store: Store,
  upload: Upload,
): Promise<{ size: number; counts: FateCounts }> {
  const { size } = await findCampaign(store, upload.campaign, store.db);
  await store.sql.begin(async (tx) => {
    await planFreshly(tx);
    const { campaignId } = upload;
    await tx`
      delete from staged_fates where campaign_id = ${campaignId} and upload = ${upload.upload}`;
    await findRepeated(tx, upload);
    await findThere(tx, upload);
    await compareFields(tx, upload);
  });
  const rows = await store.sql<{ fate: keyof FateCounts; count: number }[]>`
    select fate, count(*)::int as count from staged_fates
    where campaign_id = ${upload.campaignId} and upload = ${upload.upload} group by fate`;
  const counts = { alreadyThere: 0, conflict: 0, repeated: 0 };
  for (const { fate, count } of rows) counts[fate] = count;
  if (counts.alreadyThere > 0) await leaveOutThere(store, upload);
  return { size, counts };
}

/** Staged tables grow and shrink by millions of rows: no plan made for a few may be kept for many. */
export async function planFreshly(tx: Queries): Promise<void> {
  await tx`set local plan_cache_mode = force_custom_plan`;
  await tx`set local work_mem = '64MB'`;
}

/** An id that a row before has is refused, whatever its content: a table says each thing once. */
async function findRepeated(tx: Queries, { campaignId, upload }: Upload): Promise<void> {
  await tx`
    insert into staged_fates (campaign_id, upload, part, line, fate, about)
    select ${campaignId}::int, ${upload}::uuid, part, line, 'repeated',
      json_build_object('part', first_part, 'line', first_line)
    from (
      select s.part, s.line, row_number() over w as turn, first_value(s.part) over w as first_part,
        first_value(s.line) over w as first_line
      from staged_measurements s
      where s.campaign_id = ${campaignId} and s.upload = ${upload}::uuid and s.head is not null
        and s.id in (
          select id from staged_measurements
          where campaign_id = ${campaignId} and upload = ${upload}::uuid and head is not null
          group by id having count(*) > 1)
      window w as (partition by s.id order by s.part, s.line)
    ) turns
    where turn > 1`;
}

/**
 * Rows whose id is there: with the very text of some version (what was corrected since is there too), or
 * with one that has to be looked at field by field.
 */
async function findThere(tx: Queries, { campaignId, upload }: Upload): Promise<void> {
  await tx`
    insert into staged_fates (campaign_id, upload, part, line, fate)
    select ${campaignId}::int, ${upload}::uuid, s.part, s.line,
      case when bool_or(m.content::text = s.head || '"postedAt":"'
        || to_char(m.posted_at at time zone 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS.US"Z"') || '",' || s.tail)
        then 'alreadyThere' else 'conflict' end
    from staged_measurements s
    join measurements m on m.campaign_id = ${campaignId} and m.id = s.id
    where s.campaign_id = ${campaignId} and s.upload = ${upload}::uuid and s.head is not null
    group by s.part, s.line
    on conflict do nothing`;
}

type Place = { part: number; line: number };
type Differing = Place & { id: string; content: string; versions: string[] };

async function compareFields(tx: Queries, { campaignId, upload }: Upload): Promise<void> {
  let after: Place = { part: -1, line: -1 };
  for (;;) {
    const rows = await tx<Differing[]>`
      select s.part, s.line, s.id, s.head || s.tail as content,
        array(select m.content::text from measurements m
          where m.campaign_id = ${campaignId} and m.id = s.id order by m.from_size desc) as versions
      from staged_fates f
      join staged_measurements s on s.campaign_id = f.campaign_id and s.upload = f.upload
        and s.part = f.part and s.line = f.line
      where f.campaign_id = ${campaignId} and f.upload = ${upload}::uuid and f.fate = 'conflict'
        and (f.part, f.line) > (${after.part}::int, ${after.line}::int)
      order by f.part, f.line limit ${ROWS_AT_A_TIME}`;
    if (rows.length === 0) return;
    const found = rows.map(({ id, content, versions }) => conflictOf(id, content, versions));
    await tx`
      update staged_fates f
      set fate = case when r.about is null then 'alreadyThere' else 'conflict' end,
        about = r.about::json
      from unnest(
        ${rows.map(({ part }) => part)}::int[], ${rows.map(({ line }) => line)}::int[],
        ${found.map((conflict) => conflict && JSON.stringify(conflict))}::text[]
      ) as r(part, line, about)
      where f.campaign_id = ${campaignId} and f.upload = ${upload}::uuid and f.part = r.part
        and f.line = r.line`;
    after = rows.at(-1)!;
  }
}

/** The first field that differs from the newest version, or null where some version is the same. */
function conflictOf(id: string, content: string, versions: string[]): Conflict | null {
  const posted = JSON.parse(content) as Record<string, unknown>;
  const there = versions.map((text) => JSON.parse(text) as Record<string, unknown>);
  const differing = there.map((one) => differingFields(posted, one));
  if (differing.some((fields) => fields.length === 0)) return null;
  const field = differing[0]![0]!;
  return { id, field, there: there[0]![field] ?? null, posted: posted[field] };
}

type Affected = { part: number; entry: number };

/** Makes the entries anew in which a row is there already, without it; one without rows is dropped. */
async function leaveOutThere(store: Store, upload: Upload): Promise<void> {
  const { campaignId, upload: id } = upload;
  const affected = await store.sql.begin(async (tx) => {
    await planFreshly(tx);
    const entries = await tx<Affected[]>`
      select distinct s.part, s.entry from staged_fates f
      join staged_measurements s on s.campaign_id = f.campaign_id and s.upload = f.upload
        and s.part = f.part and s.line = f.line
      where f.campaign_id = ${campaignId} and f.upload = ${id}::uuid
        and f.fate = 'alreadyThere' and s.entry is not null
      order by s.part, s.entry`;
    await tx`
      update staged_measurements s set entry = null, place = null
      from staged_fates f
      where f.campaign_id = ${campaignId} and f.upload = ${id}::uuid and f.fate = 'alreadyThere'
        and s.campaign_id = ${campaignId} and s.upload = ${id}::uuid and s.part = f.part
        and s.line = f.line and s.entry is not null`;
    return entries;
  });
  for (const one of affected) await remakeEntry(store, upload, one);
}

async function remakeEntry(store: Store, upload: Upload, { part, entry }: Affected): Promise<void> {
  const { campaignId, upload: id } = upload;
  await store.sql.begin(async (tx) => {
    await planFreshly(tx);
    const [old] = await tx<{ firstLine: number; lastLine: number }[]>`
      delete from staged_entries
      where campaign_id = ${campaignId} and upload = ${id}::uuid and part = ${part}
        and entry = ${entry}
      returning first_line as "firstLine", last_line as "lastLine"`;
    if (old === undefined) return;
    const rows = await tx<EntryRow[]>`
      select line, measurand, (head || tail)::json->>'observedAt' as "observedAt",
        head || tail as text
      from staged_measurements
      where campaign_id = ${campaignId} and upload = ${id}::uuid and part = ${part}
        and line between ${old.firstLine} and ${old.lastLine} and entry = ${entry}
      order by line`;
    if (rows.length === 0) return;
    await tx`
      update staged_measurements s set place = r.place
      from unnest(${rows.map(({ line }) => line)}::int[], ${rows.map((_, i) => i)}::int[])
        as r(line, place)
      where s.campaign_id = ${campaignId} and s.upload = ${id}::uuid and s.part = ${part}
        and s.line = r.line`;
    const made = { ...stagedEntry(rows, new Map()), entry };
    await insertStagedEntries(tx, { ...upload, part }, [made]);
  });
}
