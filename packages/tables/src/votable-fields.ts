import { MAX_CELL } from "./limits";
import { integerBounds } from "./number-text";
import { plainColumn, type RawColumn } from "./raw-table";

/** Types of VOTable 1.4, section 6, with the bytes of one value in BINARY. */
export const datatypes = {
  boolean: 1,
  bit: 1,
  unsignedByte: 1,
  short: 2,
  int: 4,
  long: 8,
  char: 1,
  unicodeChar: 2,
  float: 4,
  double: 8,
  floatComplex: 8,
  doubleComplex: 16,
} as const;
export type VoDatatype = keyof typeof datatypes;

export const bounds = {
  unsignedByte: integerBounds(8, false),
  short: integerBounds(16, true),
  int: integerBounds(32, true),
  long: integerBounds(64, true),
} as const;

export type VoField = {
  name: string;
  datatype: VoDatatype;
  /** `value`: one a cell; `text`: characters; `array`: several values, kept as text. */
  form: "value" | "text" | "array";
  /** How many values a cell has; null: as many as the cell says, in BINARY before them. */
  count: number | null;
  unit: string | null;
  ucd: string | null;
  description: string | null;
  xtype: string | null;
  /** Of a TIMESYS, or whatever else. */
  ref: string | null;
  /** As VALUES has it. */
  nullText: string | null;
  /** Why cells of this field can't be read. */
  problem: { found: string; allowed: string } | null;
};

export type TimeSystem = { scale: string | null; origin: string | null; reference: string | null };

/** Past it a name, unit or UCD is no such thing. */
const MAX_ATTRIBUTE = 500;

/** A FIELD or PARAM as its attributes say. */
export function readField(attribute: (name: string) => string | null, index: number): VoField {
  const given = (name: string) => attribute(name)?.trim().slice(0, MAX_ATTRIBUTE) || null;
  const datatype = given("datatype") ?? "";
  const known = Object.hasOwn(datatypes, datatype);
  const isText = datatype === "char" || datatype === "unicodeChar";
  const size = readArraysize(given("arraysize"));
  const isScalar = given("arraysize") === null || given("arraysize") === "1";
  const isComplex = datatype.endsWith("Complex");
  return {
    name: given("name") ?? given("ID") ?? `column ${index + 1}`,
    datatype: known ? (datatype as VoDatatype) : "char",
    form: isText ? "text" : isScalar && !isComplex ? "value" : "array",
    count: size === undefined ? null : size,
    unit: given("unit"),
    ucd: given("ucd"),
    description: null,
    xtype: given("xtype"),
    ref: given("ref"),
    nullText: null,
    problem: !known
      ? {
          found: datatype === "" ? "no datatype" : `the datatype ${datatype.slice(0, 80)}`,
          allowed: Object.keys(datatypes).join(", "),
        }
      : size === undefined || (size ?? 0) > MAX_CELL
        ? {
            found: `the arraysize ${given("arraysize")?.slice(0, 80)}`,
            allowed: `a count as 3, 2x3, * or 3x*, at most ${MAX_CELL} values`,
          }
        : null,
  };
}

/** Null: changes from cell to cell; undefined: not an arraysize. */
function readArraysize(text: string | null): number | null | undefined {
  if (text === null) return 1;
  if (!/^(?:\d{1,9}x){0,8}(?:\d{0,9}\*|\d{1,9})$/.test(text)) return undefined;
  if (text.endsWith("*")) return null;
  return text.split("x").reduce((count, size) => count * Number(size), 1);
}

/** A field as a column; its time's scale, origin and place are its TIMESYS's. */
export function columnOf(field: VoField, systems: ReadonlyMap<string, TimeSystem>): RawColumn {
  const system = field.ref === null ? undefined : systems.get(field.ref);
  const numeric =
    field.form === "value" && field.datatype !== "boolean" && field.datatype !== "bit";
  return {
    ...plainColumn(field.name),
    unit: field.unit,
    ucd: field.ucd,
    description: field.description,
    kind: numeric ? "number" : field.form === "value" ? "boolean" : "text",
    ...timeOf(field, system, numeric),
  };
}

function timeOf(
  field: VoField,
  system: TimeSystem | undefined,
  numeric: boolean,
): Partial<RawColumn> {
  const xtype = field.xtype?.toLowerCase() ?? "";
  const said = /timestamp|^iso-?8601$/.test(xtype)
    ? "iso"
    : xtype === "jd" || xtype === "mjd"
      ? xtype
      : null;
  if (system === undefined) return said === null ? {} : { kind: "time", timeFormat: said };
  const { format, origin } = numeric ? originOf(system.origin) : { format: "iso", origin: null };
  return {
    kind: "time",
    timeScale: system.scale?.toLowerCase() ?? null,
    timeFormat: format ?? said,
    timeOrigin: origin,
    timeReference: placeOf(system.reference),
  };
}

function placeOf(reference: string | null): string | null {
  const place = reference?.toLowerCase() ?? "";
  return place === "" || place === "unknown" ? null : place;
}

/** Days since a Julian Date, two of which have names of their own. */
function originOf(text: string | null): { format: string | null; origin: number | null } {
  if (text === null) return { format: null, origin: null };
  if (text === "MJD-origin") return { format: "mjd", origin: null };
  if (text === "JD-origin") return { format: "jd", origin: null };
  const origin = Number(text);
  if (!Number.isFinite(origin)) return { format: `since ${text}`, origin: null };
  if (origin === 2_400_000.5) return { format: "mjd", origin: null };
  return { format: "jd", origin: origin === 0 ? null : origin };
}
