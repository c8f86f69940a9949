import type { CampaignDocument, Measurement } from "@weighhouse/campaign/document";
import { isUnclaimed } from "./claimed-names";
import { fieldOfName } from "./field-names";
import type { WrittenCell, WrittenColumn, WrittenTable } from "./written-table";

type Declarations = Pick<CampaignDocument, "observables" | "measurands">;
type Written = { column: WrittenColumn; cell: (measurement: Measurement) => WrittenCell };

/**
 * Measurements as a table: their fields under their own names, conditions and extras under theirs,
 * and of the fields that may be absent those that are there. One unit for all stands in the columns;
 * several stand in a column of their own. Reading the table gives the same measurements, without
 * `postedAt`, which is the ledger's.
 */
export function measurementTable(
  measurements: readonly Measurement[],
  declarations: Declarations,
): WrittenTable {
  const unitOf = measuredUnits(declarations);
  const units = new Set(measurements.filter(hasValue).map(unitOf));
  const [only = null] = units.size === 1 ? units : [];
  const fields = [
    ...fieldColumns(only),
    ...(units.size > 1 ? [unitColumn(unitOf)] : []),
    ...conditionColumns(measurements, declarations),
  ].filter(
    ({ column, cell }) =>
      REQUIRED.has(column.name) || measurements.some((measurement) => cell(measurement) !== null),
  );
  const taken = new Set(fields.map(({ column }) => column.name.toLowerCase()));
  const written = [...fields, ...extraColumns(measurements, taken)];
  return {
    columns: written.map(({ column }) => column),
    rows: measurements.map((measurement) => written.map(({ cell }) => cell(measurement))),
  };
}

const REQUIRED = new Set(["id", "measurand"]);

function hasValue({ value }: Measurement): boolean {
  return value !== null;
}

/** A measurement's own unit, else its observable's. */
function measuredUnits({ observables, measurands }: Declarations) {
  const units = new Map(observables.map(({ key, unit }) => [key, unit]));
  const ofMeasurand = new Map(
    measurands.map(({ key, observable }) => [key, units.get(observable)]),
  );
  return ({ unit, measurand }: Measurement): string | null =>
    unit ?? ofMeasurand.get(measurand) ?? null;
}

function written(
  name: string,
  kind: WrittenColumn["kind"],
  cell: Written["cell"],
  more: Partial<WrittenColumn> = {},
): Written {
  return { column: { name, kind, unit: null, ucd: null, description: null, ...more }, cell };
}

function fieldColumns(unit: string | null): Written[] {
  return [
    written("id", "text", ({ id }) => id, { ucd: "meta.id;meta.main" }),
    written("measurand", "text", ({ measurand }) => measurand, {
      description: "Key of the measurand in its campaign",
    }),
    written("facility", "text", ({ facility }) => facility, { ucd: "meta.id;instr.obsty" }),
    written("team", "text", ({ team }) => team),
    written("batch", "text", ({ batch }) => batch),
    written("observedAt", "time", ({ observedAt }) => observedAt, {
      ucd: "time.epoch",
      description: "When it was observed",
    }),
    written("knownSince", "time", ({ knownSince }) => knownSince, {
      description: "Since when it is known, if before it was posted",
    }),
    written("value", "number", ({ value }) => value, {
      unit,
      description: "The measured value, or the limit where there is one",
    }),
    written("sd", "number", ({ sd }) => sd, {
      unit,
      ucd: "stat.error",
      description: "Standard uncertainty of value",
    }),
    written("sdDex", "number", ({ sdDex }) => sdDex, {
      unit: "dex",
      description: "Standard uncertainty of log10 of value",
    }),
    written("plus", "number", ({ plus }) => plus, { unit, description: "Uncertainty upwards" }),
    written("minus", "number", ({ minus }) => minus, {
      unit,
      description: "Uncertainty downwards",
    }),
    written("limit", "text", ({ limit }) => limit, {
      description: "What value is a limit of: upper, lower, fainter or brighter",
    }),
    written("confidence", "number", ({ confidence }) => confidence, {
      description: "Probability at which the limit is given",
    }),
    written("sigmas", "number", ({ sigmas }) => sigmas, {
      description: "Standard deviations at which the limit is given",
    }),
    written("noise", "text", ({ noise }) => noise),
    written("occurred", "boolean", ({ occurred }) => occurred),
    written("efficiency", "number", ({ efficiency }) => efficiency),
    written("falseAlarm", "number", ({ falseAlarm }) => falseAlarm),
    written("count", "integer", ({ count }) => count),
    written("exposure", "number", ({ exposure }) => exposure),
    written("background", "number", ({ background }) => background),
    written("status", "text", ({ status }) => (status === "final" ? null : status), {
      description: "provisional, or nothing for final",
    }),
    written("source", "text", ({ source }) => source),
    written("shared", "text", ({ shared }) => loadings(shared), {
      description: "Shared errors with their coefficients, as zero-point:1; scale:0.5",
    }),
    written("sameData", "text", ({ sameData }) => sameData),
    written("setAside", "text", ({ setAside }) => setAside?.reason ?? null, {
      description: "Why it isn't counted",
    }),
  ];
}

function unitColumn(unitOf: (measurement: Measurement) => string | null): Written {
  return written("unit", "text", (one) => (hasValue(one) ? unitOf(one) : one.unit), {
    description: "Unit of value, sd, plus and minus",
  });
}

function loadings(shared: Measurement["shared"]): string | null {
  if (shared.length === 0) return null;
  return shared.map(({ error, coefficient }) => `${error}:${coefficient}`).join("; ");
}

function conditionColumns(
  measurements: readonly Measurement[],
  { observables }: Declarations,
): Written[] {
  const names = namesIn(measurements, ({ conditions }) => conditions);
  return names.map((name) => {
    const units = new Set(
      observables.flatMap(({ conditions }) =>
        conditions.filter(({ key }) => key === name).map(({ unit }) => unit),
      ),
    );
    const [unit = null] = units.size === 1 ? units : [];
    const column = fieldOfName(name) === null ? name : `conditions.${name}`;
    return written(column, "number", ({ conditions }) => conditions[name] ?? null, { unit });
  });
}

/** What a column of extras holds is numbers, truths or, where it is mixed, text. */
function extraColumns(measurements: readonly Measurement[], taken: ReadonlySet<string>): Written[] {
  return namesIn(measurements, ({ extra }) => extra).flatMap((name) => {
    const types = new Set(
      measurements.flatMap(({ extra }) => {
        const cell = extra[name] ?? null;
        return cell === null ? [] : [typeof cell];
      }),
    );
    if (types.size === 0) return [];
    const isPlain = isUnclaimed(name) && !taken.has(name.toLowerCase());
    const column = isPlain ? name : `extra.${name}`;
    const cellOf = ({ extra }: Measurement) => extra[name] ?? null;
    if (types.size > 1 || types.has("string")) {
      const text = (cell: WrittenCell) => (cell === null ? null : String(cell));
      return [written(column, "text", (measurement) => text(cellOf(measurement)))];
    }
    return [written(column, types.has("number") ? "number" : "boolean", cellOf)];
  });
}

function namesIn(
  measurements: readonly Measurement[],
  recordOf: (measurement: Measurement) => Record<string, unknown>,
): string[] {
  return [...new Set(measurements.flatMap((measurement) => Object.keys(recordOf(measurement))))];
}
