import type { PartContent } from "@weighhouse/campaign/parts";
import type { Reads } from "@weighhouse/campaign/reads";
import type { Queries } from "./queries";
import type { ProjectedRow } from "./projector";

/** A row as the database gives it; `content` is JSON text. */
type StoredRow = Omit<ProjectedRow, "content" | "text"> & { content: string };

/** The current rows that an append looks at. */
export async function currentRows(
  sql: Queries,
  campaignId: number,
  { keys, whole, facilities }: Reads,
): Promise<ProjectedRow[]> {
  const ids = new Set<string>();
  const wanted = new Map<string, Reads["keys"][number]>();
  for (const { part, key } of keys) {
    if (part === "measurement") ids.add(key);
    else if (!whole.includes(part)) wanted.set(`${part} ${key}`, { part, key });
  }
  const rows = await Promise.all([
    wanted.size === 0 ? [] : partsOfKeys(sql, campaignId, [...wanted.values()]),
    whole.length === 0 ? [] : wholeParts(sql, campaignId, whole),
    ids.size + facilities.length === 0
      ? []
      : measurementRows(sql, campaignId, { ids: [...ids], facilities }),
  ]);
  return rows.flat().map(readRow);
}

function partsOfKeys(sql: Queries, campaignId: number, keys: Reads["keys"]) {
  return sql<StoredRow[]>`
    select p.part, p.key, p.from_size as "fromSize", p.to_size as "toSize",
      p.first_seq as "firstSeq", p.first_place as "firstPlace", p.content
    from json_to_recordset(${JSON.stringify(keys)}::text::json) as wanted(part text, key text)
    join parts p on p.part = wanted.part and p.key = wanted.key
    where p.campaign_id = ${campaignId} and p.to_size is null`;
}

function wholeParts(sql: Queries, campaignId: number, whole: Reads["whole"]) {
  return sql<StoredRow[]>`
    select part, key, from_size as "fromSize", to_size as "toSize", first_seq as "firstSeq",
      first_place as "firstPlace", content
    from parts
    where campaign_id = ${campaignId} and to_size is null and part = any(${whole}::text[])`;
}

/** Two looks, each by its index: over "one or the other" a large campaign would be read whole. */
function measurementRows(
  sql: Queries,
  campaignId: number,
  wanted: { ids: string[]; facilities: string[] },
) {
  const columns = sql`
    select 'measurement' as part, id as key, from_size as "fromSize", to_size as "toSize",
      first_seq as "firstSeq", first_place as "firstPlace", content
    from measurements
    where campaign_id = ${campaignId} and to_size is null`;
  return sql<StoredRow[]>`
    ${columns} and id = any(${wanted.ids}::text[])
    union all
    ${columns} and facility = any(${wanted.facilities}::text[])
      and not id = any(${wanted.ids}::text[])
    order by "firstSeq", "firstPlace"`;
}

export function readRow(row: StoredRow): ProjectedRow {
  return { ...row, text: row.content, content: JSON.parse(row.content) as PartContent };
}

/** The tables that rows are written to: the projections, or those of a rebuild. */
export type Target = { parts: string; measurements: string };

const PROJECTIONS: Target = { parts: "parts", measurements: "measurements" };

/** Writes what a projector did. Bulk rows go as one JSON text: multi-row values are slow. */
export function writeRows(
  sql: Queries,
  campaignId: number,
  { made, closed }: { made: ProjectedRow[]; closed: ProjectedRow[] },
  target: Target = PROJECTIONS,
): Promise<unknown>[] {
  const isMeasurement = (row: ProjectedRow) => row.part === "measurement";
  const isPart = (row: ProjectedRow) => !isMeasurement(row);
  return [
    ...closeRows(sql, campaignId, closed),
    ...insertParts(sql, campaignId, made.filter(isPart), target),
    ...insertMeasurements(sql, campaignId, made.filter(isMeasurement), target),
  ];
}

function closeRows(sql: Queries, campaignId: number, rows: ProjectedRow[]): Promise<unknown>[] {
  if (rows.length === 0) return [];
  const closing = JSON.stringify(
    rows.map(({ part, key, fromSize, toSize }) => ({ part, key, fromSize, toSize })),
  );
  return [
    sql`
      update parts p set to_size = c."toSize"
      from json_to_recordset(${closing}::text::json)
        as c(part text, key text, "fromSize" int, "toSize" int)
      where p.campaign_id = ${campaignId} and p.part = c.part and p.key = c.key
        and p.from_size = c."fromSize"`,
    sql`
      update measurements m set to_size = c."toSize"
      from json_to_recordset(${closing}::text::json)
        as c(part text, key text, "fromSize" int, "toSize" int)
      where m.campaign_id = ${campaignId} and c.part = 'measurement' and m.id = c.key
        and m.from_size = c."fromSize"`,
  ];
}

function insertParts(
  sql: Queries,
  campaignId: number,
  rows: ProjectedRow[],
  target: Target,
): Promise<unknown>[] {
  if (rows.length === 0) return [];
  const inserting = JSON.stringify(rows.map((row) => ({ ...row, content: undefined })));
  return [
    sql`
      insert into ${sql(target.parts)}
        (campaign_id, part, key, from_size, to_size, first_seq, first_place, content)
      select ${campaignId}::int, part, key, "fromSize", "toSize", "firstSeq", "firstPlace", text::json
      from json_to_recordset(${inserting}::text::json)
        as r(part text, key text, "fromSize" int, "toSize" int, "firstSeq" int, "firstPlace" int,
          text text)`,
  ];
}

function insertMeasurements(
  sql: Queries,
  campaignId: number,
  rows: ProjectedRow[],
  target: Target,
): Promise<unknown>[] {
  if (rows.length === 0) return [];
  const inserting = JSON.stringify(
    rows.map((row) => ({ ...row.content, ...row, content: undefined, ...marksOf(row) })),
  );
  return [
    sql`
      insert into ${sql(target.measurements)}
        (campaign_id, id, from_size, to_size, first_seq, first_place, measurand, facility, team,
        batch, observed_at, posted_at, value, sd, unit, set_aside, withdrawn, content)
      select ${campaignId}::int, key, "fromSize", "toSize", "firstSeq", "firstPlace", measurand,
        facility, team, batch, "observedAt", "postedAt", value, sd, unit, "setAside", withdrawn, text::json
      from json_to_recordset(${inserting}::text::json)
        as r(key text, "fromSize" int, "toSize" int, "firstSeq" int, "firstPlace" int,
          measurand text, facility text, team text, batch text, "observedAt" timestamptz,
          "postedAt" timestamptz, value double precision, sd double precision, unit text,
          "setAside" boolean, withdrawn boolean, text text)`,
  ];
}

function marksOf({ content }: ProjectedRow): { setAside: boolean; withdrawn: boolean } {
  const has = (name: string) => content[name] !== null && content[name] !== undefined;
  return { setAside: has("setAside"), withdrawn: has("withdrawn") };
}
