import { isFitsTime } from "./field-names";
import { LEAP_SECONDS_KNOWN_TO } from "./times/leap-seconds";
import type { RawCell, RawColumn } from "./raw-table";
import type { ColumnMatch, TimeReading } from "./table-match";
import { readTimeWords } from "./time-words";

const MJD_ZERO = 2_400_000.5;
/** Where a time is counted without light having to travel: to a fiftieth of a second at most. */
const AT_THE_OBSERVER = new Set(["topocenter", "geocenter"]);
const SCALES: Record<string, TimeReading["scale"]> = {
  utc: "utc",
  ut: "utc",
  tt: "tt",
  tdt: "tt",
  tai: "tai",
  tdb: "tdb",
};
const FORMATS: Record<string, TimeReading["format"]> = {
  iso: "iso",
  isot: "iso",
  fits: "iso",
  jd: "jd",
  mjd: "mjd",
};
const NUMERIC = /^[+-]?\d*[.,]?\d+(?:[eE][+-]?\d+)?$/;

const WITHOUT_ZONE = /^\d{4}-\d{2}-\d{2}[Tt\s]\d{2}:\d{2}(?::\d{2}(?:\.\d+)?)?$/;

/** How a column's times are read: by what was chosen, what the file declares, what its name says. */
export function timeMatch(
  match: ColumnMatch,
  { column, cells }: { column: RawColumn; cells: Iterable<RawCell> },
  chosen: TimeReading | null,
): ColumnMatch {
  if (chosen !== null) {
    return { ...match, time: chosen, unit: null, conversion: `${inWords(chosen)}, as chosen` };
  }
  const said = readTimeWords(column.name);
  const reference = column.timeReference ?? said?.reference ?? null;
  const format = column.timeFormat ?? said?.format ?? null;
  const scale = column.timeScale ?? said?.scale ?? null;
  const refused =
    refusedReference(reference) ??
    refusedFormat(format) ??
    refusedScale(scale) ??
    refusedUnit(match);
  if (refused !== null) return { ...match, problem: refused };
  const origin = column.timeOrigin ?? said?.origin ?? null;
  const known = FORMATS[format ?? ""] ?? (origin === null ? null : "jd");
  if (known === null || known === "iso") return isoMatch(match, { column, cells }, scale);
  const offset =
    origin === null ? 0 : origin - (origin === MJD_ZERO || known === "mjd" ? MJD_ZERO : 0);
  const isMjd = origin === MJD_ZERO || known === "mjd";
  const time: TimeReading = {
    format: isMjd ? "mjd" : "jd",
    scale: SCALES[scale ?? "utc"]!,
    offset,
  };
  const taken = scale === null ? ", taken as UTC" : scale === "ut" ? ", UT taken as UTC" : "";
  return { ...match, time, unit: null, conversion: `${inWords(time)}${taken}` };
}

type Refusal = ColumnMatch["problem"];

function refusedReference(reference: string | null): Refusal {
  if (reference === null || AT_THE_OBSERVER.has(reference)) return null;
  return {
    found: `times counted at the ${reference}`,
    allowed:
      "times at the observer; light takes up to 8.3 minutes more or less to there. Choose the column's format, scale and offset to take them as they are, or ignore it",
  };
}

function refusedFormat(format: string | null): Refusal {
  if (format === null || FORMATS[format] !== undefined) return null;
  return { found: `times in the format ${format}`, allowed: "ISO 8601, JD or MJD" };
}

function refusedScale(scale: string | null): Refusal {
  if (scale === null || SCALES[scale] !== undefined) return null;
  return { found: `times in the scale ${scale.toUpperCase()}`, allowed: "UTC, TT, TAI or TDB" };
}

function refusedUnit({ unit }: ColumnMatch): Refusal {
  if (unit === null || ["d", "day", "days"].includes(unit)) return null;
  return { found: `times in ${unit}`, allowed: "days for JD and MJD, no unit for ISO 8601" };
}

function isoMatch(
  match: ColumnMatch,
  { column, cells }: { column: RawColumn; cells: Iterable<RawCell> },
  scale: string | null,
): ColumnMatch {
  const first = firstOf(cells);
  if (typeof first === "number" || NUMERIC.test(String(first))) {
    const found = `the number ${first} where nothing says what it counts`;
    const allowed =
      "JD or MJD in the column's name or unit, or chosen for it; ISO 8601; or ignore the column";
    return { ...match, problem: { found, allowed } };
  }
  const taken = SCALES[scale ?? (isFitsTime(column.name) ? "utc" : "")];
  if (taken === undefined) {
    if (!WITHOUT_ZONE.test(String(first))) return match;
    const found = `${JSON.stringify(first)}, without a zone`;
    const allowed =
      "a Z behind the times, UTC or another scale in the column's name or unit, or chosen for it";
    return { ...match, problem: { found, allowed } };
  }
  const time: TimeReading = { format: "iso", scale: taken, offset: 0 };
  const conversion = taken === "utc" ? null : inWords(time);
  return { ...match, time, unit: null, conversion };
}

function firstOf(cells: Iterable<RawCell>): RawCell {
  for (const cell of cells) if (cell !== null && cell !== "") return cell;
  return null;
}

function inWords({ format, scale, offset }: TimeReading): string {
  const shift = offset === 0 ? "" : ` + ${offset} d`;
  const name = `${format === "iso" ? "ISO 8601" : format.toUpperCase()}${shift}`;
  if (scale === "utc") return `${name} in UTC to ISO 8601`;
  const steps = scale === "tai" ? "" : scale === "tt" ? " by TT - TAI = 32.184 s and" : TDB_STEPS;
  return `${name} in ${scale.toUpperCase()} to UTC${steps} by leap seconds (IERS Bulletin C, known to ${LEAP_SECONDS_KNOWN_TO})`;
}

const TDB_STEPS =
  " by two terms of TDB - TT (Astronomical Almanac; to 30 microseconds), TT - TAI = 32.184 s and";
