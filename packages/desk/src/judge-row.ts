import type { Measurement } from "@weighhouse/campaign/document";
import type { MeasurementContent } from "@weighhouse/campaign/entries";
import { measurementContentSchema } from "@weighhouse/campaign/entries";
import { readForm } from "@weighhouse/campaign/form";
import type { measurandFinder, unitFinder } from "@weighhouse/campaign/measurand-of";
import type { Problem } from "@weighhouse/campaign/problem";
import { quickContent } from "@weighhouse/campaign/quick-measurement";
import { LedgerError } from "@weighhouse/ledger/ledger-error";
import { contentText, defaultId } from "@weighhouse/store/content-text";
import type { ContentText } from "@weighhouse/store/content-text";
import type { Conflict } from "@weighhouse/store/post-measurements";
import type { Access } from "./access";
import type { RowProblem } from "./read-rows";
import type { GivenRow } from "./stage-lines";

/** What would become of one row, were it posted now. */
export type JudgedRow = {
  /** The line in the text, from 1; for drafts their number, from 1. */
  line: number;
  id: string | null;
  fate: "new" | "alreadyThere" | "conflict" | "refused";
  /** Why it is refused, by field; empty otherwise. */
  problems: RowProblem[];
  /** The first field that differs from what is there under that id. */
  conflict: Conflict | null;
  /** As it would be entered; null for a row that doesn't read. */
  measurement: MeasurementContent | null;
  /** What was converted, or filled in for it. */
  notes: string[];
};

/** A row by itself: as it would be entered, with its canonical text, or refused. */
export type RowByItself = { row: JudgedRow; text: ContentText | null };

export type RowContext = {
  access: Access;
  find: ReturnType<typeof measurandFinder>;
  unitOf: ReturnType<typeof unitFinder>;
};

/** Stands for an id that is made from the content once that reads. */
const PLACEHOLDER = "-";

/** A row's content with its id, its measurand and its team filled in, or why it can't be read. */
export function judgeRow(given: GivenRow, { access, find, unitOf }: RowContext): RowByItself {
  const { line, draft, problems } = given;
  const notes = [...(given.notes ?? [])];
  const refused = (id: unknown, faults: RowProblem[]): RowByItself => ({
    row: {
      line,
      id: typeof id === "string" ? id : null,
      fate: "refused",
      problems: faults,
      conflict: null,
      measurement: null,
      notes,
    },
    text: null,
  });
  if (draft === null || problems.length > 0) return refused(draft?.["id"], problems);
  const writable = (read: MeasurementContent, own: unknown): RowByItself => {
    // Named or not, it is the same unit: a table that names it is no other than one that doesn't.
    const value = read.unit === unitOf(read.measurand) ? { ...read, unit: null } : read;
    if (value.observedAt?.startsWith("0000")) {
      const found = value.observedAt;
      return refused(own, [
        { column: "observedAt", found, allowed: "a year from 0001, as PostgreSQL has" },
      ]);
    }
    try {
      const measurement = own === null ? { ...value, id: defaultId(value) } : value;
      const text = contentText(measurement);
      const row = { line, id: measurement.id, problems: [], conflict: null, measurement, notes };
      return { row: { ...row, fate: "new" }, text };
    } catch (error) {
      if (!(error instanceof LedgerError)) throw error;
      return refused(own, [unwritable(error)]);
    }
  };
  if (given.measurement !== undefined) {
    const plain = contentOf(given.measurement, access.team);
    const other = access.role === "member" && plain.team !== access.team;
    if (other) return refused(plain.id, [otherTeam(plain.team, access)]);
    return writable(plain, plain.id);
  }
  const id = draft["id"] ?? null;
  const team = draft["team"] ?? access.team;
  const filled: Record<string, unknown> = { ...draft, team, id: id ?? PLACEHOLDER };
  const faults = fillMeasurand(filled, find, notes);
  const read = readContent(filled);
  faults.push(...read.problems.map(rowProblem));
  if (access.role === "member" && team !== access.team) faults.push(otherTeam(team, access));
  if (read.value === null || faults.length > 0) return refused(id, faults);
  return writable(read.value, id);
}

/** `observable` is no field of a measurement: it only says in which measurand the row may fall. */
function fillMeasurand(
  draft: Record<string, unknown>,
  find: ReturnType<typeof measurandFinder>,
  notes: string[],
): RowProblem[] {
  if ((draft["measurand"] ?? null) !== null) return [];
  const falling = find(draft);
  delete draft["observable"];
  if (!("measurand" in falling)) {
    // The other fields are read all the same: everything that is wrong is told at once.
    draft["measurand"] = "none";
    return [{ column: "measurand", ...falling }];
  }
  draft["measurand"] = falling.measurand;
  notes.push(`falls in the measurand ${falling.measurand}`);
  return [];
}

/** Field by field, which of hundreds of thousands is several times as fast as to spread them. */
function contentOf(one: Measurement, team: string | null): MeasurementContent {
  return {
    id: one.id,
    measurand: one.measurand,
    facility: one.facility,
    team: one.team ?? team,
    batch: one.batch,
    observedAt: one.observedAt,
    knownSince: one.knownSince,
    conditions: one.conditions,
    value: one.value,
    sd: one.sd,
    sdDex: one.sdDex,
    plus: one.plus,
    minus: one.minus,
    limit: one.limit,
    confidence: one.confidence,
    sigmas: one.sigmas,
    noise: one.noise,
    occurred: one.occurred,
    efficiency: one.efficiency,
    falseAlarm: one.falseAlarm,
    count: one.count,
    exposure: one.exposure,
    background: one.background,
    unit: one.unit,
    status: one.status,
    source: one.source,
    extra: one.extra,
    shared: one.shared,
    sameData: one.sameData,
    setAside: one.setAside,
    claimed: null,
  };
}

function otherTeam(team: unknown, access: Access): RowProblem {
  const own = access.team === null ? "no team: you are of none" : `${access.team}: your own team`;
  return { column: "team", found: JSON.stringify(team), allowed: own };
}

/** Most rows are good, and the quick reading tells; only what fails it is read for its words. */
function readContent(content: unknown): { value: MeasurementContent | null; problems: Problem[] } {
  const quick = quickContent(content);
  if (quick !== null) return { value: quick, problems: [] };
  const read = measurementContentSchema.safeParse(content);
  if (read.success) return { value: read.data, problems: [] };
  return { value: null, problems: readForm(measurementContentSchema, content, "").problems };
}

/** What no payload can hold: U+0000, half a surrogate pair, more than a payload's size. */
function unwritable({ message }: LedgerError): RowProblem {
  const [, field, found, allowed] =
    /^\/([^/:]+)[^:]*: found (.*); allowed is (.*)$/s.exec(message) ?? [];
  return field !== undefined && found !== undefined && allowed !== undefined
    ? { column: field, found, allowed }
    : { column: null, found: message, allowed: "what a ledger's entry can hold" };
}

/** `/sd` is the field sd; `/conditions/depth` is conditions.depth, as in a table's columns. */
export function rowProblem({ pointer, found, allowed }: Problem): RowProblem {
  const [, field, within] = pointer.split("/");
  const column = field === "conditions" && within ? `conditions.${within}` : (field ?? null);
  return { column, found, allowed };
}
