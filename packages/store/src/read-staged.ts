import type { MeasurementContent } from "@weighhouse/campaign/entries";
import type { Conflict } from "./post-measurements";
import type { Queries } from "./queries";
import type { Store } from "./open-store";
import type { Upload } from "./uploads";

/** A staged row with what became of it; `problems` are as they were staged. */
export type StagedRow = {
  part: number;
  line: number;
  id: string | null;
  measurand: string | null;
  problems: unknown[];
  notes: string[];
} & (
  | { fate: "new" | "alreadyThere" | "refused"; about: null }
  | { fate: "conflict"; about: Conflict }
  | { fate: "repeated"; about: { part: number; line: number } }
);

const ROWS_AT_A_TIME = 2000;

/** Every staged row in order, or those that keep a posting from being taken. */
export async function* stagedRows(
  store: Store,
  { campaignId, upload }: Upload,
  which: "all" | "faults",
): AsyncGenerator<StagedRow[]> {
  const { sql } = store;
  const atFault =
    which === "all"
      ? sql`true`
      : sql`(f.fate in ('conflict', 'repeated')
          or (s.problems is not null and f.fate is distinct from 'alreadyThere'))`;
  let after = { part: -1, line: -1 };
  for (;;) {
    const rows = await sql<RawRow[]>`
      select s.part, s.line, s.id, s.measurand, s.problems, s.notes, f.about,
        coalesce(f.fate, case when s.problems is null then 'new' else 'refused' end) as fate
      from staged_measurements s
      left join staged_fates f on f.campaign_id = s.campaign_id and f.upload = s.upload
        and f.part = s.part and f.line = s.line
      where s.campaign_id = ${campaignId} and s.upload = ${upload}::uuid
        and (s.part, s.line) > (${after.part}::int, ${after.line}::int) and ${atFault}
      order by s.part, s.line limit ${ROWS_AT_A_TIME}`;
    if (rows.length > 0) yield rows.map(readRow);
    if (rows.length < ROWS_AT_A_TIME) return;
    after = rows.at(-1)!;
  }
}

type RawRow = Record<"problems" | "notes" | "about", string | null> & {
  part: number;
  line: number;
  id: string | null;
  measurand: string | null;
  fate: StagedRow["fate"];
};

function readRow({ problems, notes, about, fate, ...row }: RawRow): StagedRow {
  const read = (text: string | null) => (text === null ? null : (JSON.parse(text) as never));
  const stays = fate === "refused";
  return {
    ...row,
    problems: stays ? (read(problems) ?? []) : [],
    notes: read(notes) ?? [],
    fate,
    about: read(about),
  } as StagedRow;
}

/** How many rows an upload has, and how many are refused by themselves and not repeated. */
export async function countStaged(
  store: Store,
  { campaignId, upload }: Upload,
): Promise<{ rows: number; refused: number }> {
  const [row] = await store.sql<{ rows: number; refused: number }[]>`
    select count(*)::int as rows, count(s.problems) filter (where f.fate is null)::int as refused
    from staged_measurements s
    left join staged_fates f on f.campaign_id = s.campaign_id and f.upload = s.upload
      and f.part = s.part and f.line = s.line and f.fate in ('alreadyThere', 'repeated')
    where s.campaign_id = ${campaignId} and s.upload = ${upload}::uuid`;
  return row!;
}

/** The measurements that would be entered, in order, some at a time. */
export async function* stagedContents(
  store: Store,
  { campaignId, upload }: Upload,
): AsyncGenerator<MeasurementContent[]> {
  let after = { part: -1, line: -1 };
  for (;;) {
    const rows = await store.sql<{ part: number; line: number; content: string }[]>`
      select part, line, head || tail as content from staged_measurements
      where campaign_id = ${campaignId} and upload = ${upload}::uuid and entry is not null
        and (part, line) > (${after.part}::int, ${after.line}::int)
      order by part, line limit ${ROWS_AT_A_TIME}`;
    if (rows.length === 0) return;
    yield rows.map(({ content }) => JSON.parse(content) as MeasurementContent);
    after = rows.at(-1)!;
  }
}

/**
 * Of the measurements that would be entered those that must be looked at together, however many
 * parts they came in: one of each measurand, batch, form and list of shared errors, and of the
 * reports of an event one of each kind.
 */
export async function stagedTogether(
  sql: Queries,
  { campaignId, upload }: Upload,
): Promise<MeasurementContent[]> {
  const rows = await sql<{ content: string }[]>`
    select distinct on (measurand, batch, shared, form) head || tail as content
    from (
      select measurand, batch, head, tail, part, line,
        substring(tail from '"shared":\\[.*\\],"sigmas"') as shared,
        array[substring(head from '"limit":[^,]*'), substring(head from '"noise":[^,]*'),
          substring(head from '"occurred":[^,]*'), substring(head from '"plus":null'),
          substring(head from '"efficiency":[^,]*'), substring(head from '"falseAlarm":[^,]*')]
          as form
      from staged_measurements
      where campaign_id = ${campaignId} and upload = ${upload}::uuid and entry is not null
        and (tail like '%"shared":[{%' or head not like '%"occurred":null%')
    ) s
    order by measurand, batch, shared, form, part, line`;
  return rows.map(({ content }) => JSON.parse(content) as MeasurementContent);
}
