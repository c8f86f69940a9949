import type { CampaignDocument } from "@weighhouse/campaign/document";
import { measurementFields } from "@weighhouse/campaign/measurement";
import type { TableColumn, TableProblem } from "./table";

/** What a table's columns are matched against: the campaign's own condition names. */
export type ColumnContext = Pick<CampaignDocument, "observables" | "measurands">;

export type Columns = {
  columns: TableColumn[];
  /** Unit of the values as the header gives it, for `value`, `sd`, `plus`, `minus` alike. */
  unit: string | null;
  /** The header says that times without a zone are UTC. */
  utc: boolean;
  /** Columns of a date and of a time of day, to be joined: their indices. */
  dateAndTime: { date: number; time: number } | null;
  problems: TableProblem[];
};

/** Times whose name says that they are UTC; DATE-OBS is so by the FITS standard, unless a file says otherwise. */
const IN_UTC = ["dateobs", "dateutc", "datetimeutc", "timeutc", "utc", "utcdate", "utctime"];

/** Columns that hold no field of their own by name, as tables of measurements call them (common practice). */
const SYNONYMS: Record<string, readonly string[]> = {
  id: ["identifier", "measurementid"],
  measurand: ["quantity"],
  facility: ["instrument", "observatory", "site", "station", "telescope"],
  batch: ["night", "run"],
  observedAt: ["date", "datetime", "observed", "obsdate", "time", "timestamp", ...IN_UTC],
  value: ["measured", "reading", "result", "val"],
  sd: [
    "err",
    "error",
    "sigma",
    "standarddeviation",
    "standarduncertainty",
    "std",
    "stddev",
    "stdev",
    "unc",
    "uncertainty",
    "valueerror",
    "σ",
  ],
  plus: ["errplus", "errup", "errorplus", "errorup", "uppererror"],
  minus: ["errdown", "errminus", "errordown", "errorminus", "lowererror"],
  count: ["counts"],
  unit: ["units"],
  source: ["bibcode", "doi", "reference", "url"],
  sameData: ["samedataas"],
  setAside: ["setasidebecause", "setasidereason"],
};

const FIELDS = new Map(
  Object.keys(measurementFields)
    .filter((field) => field !== "conditions" && field !== "extra")
    .map((field) => [plainName(field), field]),
);
const FIELDS_BY_SYNONYM = new Map(
  Object.entries(SYNONYMS).flatMap(([field, names]) => names.map((name) => [name, field])),
);
const IN_THE_UNIT = new Set(["value", "sd", "plus", "minus"]);

/** Matches a header to a measurement's fields by name, then to conditions, then by common synonyms. */
export function matchColumns(
  header: readonly string[],
  line: number,
  context: ColumnContext,
): Columns {
  const conditions = new Set(
    context.observables.flatMap((observable) => observable.conditions.map(({ key }) => key)),
  );
  const columns = header.map((text, index) => matchColumn(text, index, conditions));
  const dateAndTime = findDateAndTime(columns);
  const units = new Set(
    columns.flatMap(({ field, unit }) =>
      unit !== null && IN_THE_UNIT.has(field ?? "") ? [unit] : [],
    ),
  );
  const problems = [...twiceFilled(columns, dateAndTime), ...strangeUnits(columns, units)];
  const [unit = null] = units;
  return {
    columns,
    unit,
    utc: columns.some(({ field, unit }) => field === "observedAt" && unit === "UTC"),
    dateAndTime,
    problems: problems.map((problem) => ({ line, ...problem })),
  };
}

function matchColumn(text: string, index: number, conditions: Set<string>): TableColumn {
  const { name, unit } = partUnit(text);
  const column = text === "" ? `column ${index + 1}` : text;
  const plain = plainName(name);
  const condition = [...conditions].find((key) => key === name || plainName(key) === plain);
  const field =
    FIELDS.get(plain) ??
    (condition === undefined ? FIELDS_BY_SYNONYM.get(plain) : `conditions.${condition}`) ??
    null;
  if (field === "sd" && unit === "dex") return { column, field: "sdDex", unit: null };
  return { column, field, unit: IN_UTC.includes(plain) ? "UTC" : unit };
}

/** `value [Jy]` or `value (Jy)`: a name and the unit behind it. */
function partUnit(text: string): { name: string; unit: string | null } {
  const match = /^(.*?)\s*(?:\[([^\]]*)\]|\(([^)]*)\))$/.exec(text);
  if (match === null) return { name: text, unit: null };
  const unit = (match[2] ?? match[3] ?? "").trim();
  return { name: match[1] ?? "", unit: unit === "" ? null : unit };
}

/** Upper and lower case, spaces, underscores, hyphens and dots make no difference. */
function plainName(name: string): string {
  return name.toLowerCase().replaceAll(/[\s_.-]/g, "");
}

function findDateAndTime(columns: TableColumn[]): Columns["dateAndTime"] {
  const named = (wanted: RegExp) =>
    columns.findIndex(
      ({ column, field }) =>
        field === "observedAt" && wanted.test(plainName(partUnit(column).name)),
    );
  const [date, time] = [named(/^(utc)?date(utc)?$/), named(/^(utc)?time(utc)?$/)];
  return date === -1 || time === -1 ? null : { date, time };
}

type HeaderProblem = Omit<TableProblem, "line">;

function twiceFilled(columns: TableColumn[], joined: Columns["dateAndTime"]): HeaderProblem[] {
  const seen = new Map<string, string>();
  return columns.flatMap(({ column, field }, index) => {
    if (joined !== null && index === joined.time) return [];
    const filled = field ?? `extra ${column}`;
    const earlier = seen.get(filled);
    seen.set(filled, column);
    if (earlier === undefined) return [];
    const what =
      field === null ? "is there twice" : `fills ${field}, as the column ${earlier} does`;
    return [{ column, found: `a column that ${what}`, allowed: "each field in one column" }];
  });
}

function strangeUnits(columns: TableColumn[], units: Set<string>): HeaderProblem[] {
  const [first, ...others] = units;
  return others.map((unit) => ({
    column: columns.find((column) => column.unit === unit)?.column ?? null,
    found: `the unit ${unit} beside ${first}`,
    allowed: "one unit for value and uncertainties",
  }));
}
