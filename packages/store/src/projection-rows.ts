import type { Change, PartContent, PartName } from "@weighhouse/campaign/changes";
import type { Queries } from "./queries";
import type { ProjectedRow } from "./projector";

/** A row as the database gives it; `content` is JSON text. */
type StoredRow = Omit<ProjectedRow, "content" | "text"> & { content: string };

/** The current rows of the keys that the changes touch. */
export async function currentRows(
  sql: Queries,
  campaignId: number,
  changes: Change[],
): Promise<ProjectedRow[]> {
  const ids = new Set<string>();
  const keys = new Map<string, { part: PartName; key: string }>();
  for (const { part, key } of changes) {
    if (part === "measurement") ids.add(key);
    else keys.set(`${part} ${key}`, { part, key });
  }
  const [parts, measurements] = await Promise.all([
    keys.size === 0
      ? []
      : sql<StoredRow[]>`
          select p.part, p.key, p.from_size as "fromSize", p.to_size as "toSize",
            p.first_seq as "firstSeq", p.first_place as "firstPlace", p.content
          from json_to_recordset(${JSON.stringify([...keys.values()])}::text::json)
            as wanted(part text, key text)
          join parts p on p.part = wanted.part and p.key = wanted.key
          where p.campaign_id = ${campaignId} and p.to_size is null`,
    ids.size === 0
      ? []
      : sql<StoredRow[]>`
          select 'measurement' as part, id as key, from_size as "fromSize", to_size as "toSize",
            first_seq as "firstSeq", first_place as "firstPlace", content
          from measurements
          where campaign_id = ${campaignId} and to_size is null and id = any(${[...ids]}::text[])`,
  ]);
  return [...parts, ...measurements].map(readRow);
}

export function readRow(row: StoredRow): ProjectedRow {
  return { ...row, text: row.content, content: JSON.parse(row.content) as PartContent };
}

/** Writes what a projector did. Bulk rows go as one JSON text: multi-row values are slow. */
export function writeRows(
  sql: Queries,
  campaignId: number,
  { made, closed }: { made: ProjectedRow[]; closed: ProjectedRow[] },
): Promise<unknown>[] {
  const isMeasurement = (row: ProjectedRow) => row.part === "measurement";
  const isPart = (row: ProjectedRow) => !isMeasurement(row);
  return [
    ...closeRows(sql, campaignId, closed),
    ...insertParts(sql, campaignId, made.filter(isPart)),
    ...insertMeasurements(sql, campaignId, made.filter(isMeasurement)),
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

function insertParts(sql: Queries, campaignId: number, rows: ProjectedRow[]): Promise<unknown>[] {
  if (rows.length === 0) return [];
  const inserting = JSON.stringify(rows.map((row) => ({ ...row, content: undefined })));
  return [
    sql`
      insert into parts
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
): Promise<unknown>[] {
  if (rows.length === 0) return [];
  const inserting = JSON.stringify(
    rows.map((row) => ({ ...row.content, ...row, content: undefined, setAside: isSetAside(row) })),
  );
  return [
    sql`
      insert into measurements
        (campaign_id, id, from_size, to_size, first_seq, first_place, measurand, facility, team,
        batch, observed_at, posted_at, value, sd, unit, set_aside, content)
      select ${campaignId}::int, key, "fromSize", "toSize", "firstSeq", "firstPlace", measurand,
        facility, team, batch, "observedAt", "postedAt", value, sd, unit, "setAside", text::json
      from json_to_recordset(${inserting}::text::json)
        as r(key text, "fromSize" int, "toSize" int, "firstSeq" int, "firstPlace" int,
          measurand text, facility text, team text, batch text, "observedAt" timestamptz,
          "postedAt" timestamptz, value double precision, sd double precision, unit text,
          "setAside" boolean, text text)`,
  ];
}

function isSetAside({ content }: ProjectedRow): boolean {
  return content["setAside"] !== null && content["setAside"] !== undefined;
}
