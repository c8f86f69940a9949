import {
  FIELDS_OF_SCALE,
  fieldOfName,
  isFitsTime,
  isTimeName,
  plainName,
  PLAIN_FIELDS,
  RESULT_FIELDS,
} from "./field-names";
import { isLimitWord } from "./limit-words";
import { fitsUnit, resultField } from "./match-scope";
import type { MatchScope } from "./match-scope";
import { partNames } from "./part-names";
import type { RawColumn, RawTable } from "./raw-table";
import type { ColumnMatch } from "./table-match";
import { readTimeWords } from "./time-words";
import { ucdField } from "./ucd-fields";

export type Assigned = {
  field: string;
  why: ColumnMatch["why"];
  /** Whether there is such a field; a chosen one may be none. */
  known: boolean;
};

type Table = Pick<RawTable, "columns" | "rows">;

/** What each column is assigned to so far; null where nothing is known yet. */
type Assignment = { table: Table; scope: MatchScope; fields: (Assigned | null)[] };

/** A field for each column, in their order. */
export function assignFields(
  table: Table,
  scope: MatchScope,
  chosen: { fields: Record<string, string>; origin: "chosen" | "remembered" },
): Assigned[] {
  const at: Assignment = { table, scope, fields: table.columns.map(() => null) };
  table.columns.forEach(({ name }, index) => {
    if (!Object.hasOwn(chosen.fields, name)) return;
    const field = chosen.fields[name]!;
    at.fields[index] = { field, why: chosen.origin, known: isField(field, scope) };
  });
  assignByName(at);
  assignTimes(at);
  assignValues(at);
  giveToOne(at);
  assignParts(at);
  assignErrorsByUcd(at);
  return at.fields.map((one) => one ?? { field: "extra", why: "none", known: true });
}

function isField(field: string, { conditions, targets }: MatchScope): boolean {
  if (PLAIN_FIELDS.has(field)) return true;
  if (field.startsWith("conditions.")) return conditions.has(field.slice("conditions.".length));
  const [role = "", key = ""] = field.split("@");
  return (RESULT_FIELDS as readonly string[]).includes(role) && targets.has(key);
}

function assign(at: Assignment, index: number, field: string, why: Assigned["why"]): void {
  at.fields[index] ??= { field, why, known: true };
}

/** Columns that nothing is assigned to yet. */
function open({ table, fields }: Assignment): [RawColumn, number][] {
  return table.columns.flatMap((column, index): [RawColumn, number][] =>
    fields[index] === null ? [[column, index]] : [],
  );
}

function has({ fields }: Assignment, ...wanted: string[]): boolean {
  return fields.some((one) => one !== null && wanted.includes(one.field.split("@")[0]!));
}

function assignByName(at: Assignment): void {
  const { conditions, observables } = at.scope;
  const scales = new Set<string>(observables.map(({ scale }) => scale));
  for (const [{ name }, index] of open(at)) {
    if (name.startsWith("extra.")) assign(at, index, "extra", "name");
    const bare = name.replace(/^conditions?\./, "");
    const condition = [...conditions].find(
      (key) => key === bare || plainName(key) === plainName(bare),
    );
    const named = fieldOfName(name);
    if (named?.field === "noise" && !holds(at.table, index, /^linear$/)) continue;
    if (named?.why === "name" && isForScale(named.field, scales)) {
      assign(at, index, named.field, "name");
    } else if (condition !== undefined) {
      assign(at, index, `conditions.${condition}`, "name");
    } else if (at.scope.named.has(plainName(name))) {
      continue;
    } else if (named !== null && isForScale(named.field, scales)) {
      // Two uncertainties contradict each other, and are refused; a telescope and its site don't.
      const isResult = (RESULT_FIELDS as readonly string[]).includes(named.field);
      if (isResult || !has(at, named.field)) assign(at, index, named.field, named.why);
    }
  }
}

function isForScale(field: string, scales: Set<string>): boolean {
  const scale = FIELDS_OF_SCALE[field];
  return scale === undefined || scales.has(scale);
}

/** One column, or a date and a time of day, is the time of observation; others are kept as extra. */
function assignTimes(at: Assignment): void {
  const { table } = at;
  if (has(at, "observedAt", "date", "timeOfDay")) return;
  const candidates = open(at).filter(
    ([column]) =>
      isTimeName(column.name) ||
      readTimeWords(column.name) !== null ||
      column.kind === "time" ||
      (ucdField(column.ucd)?.kind === "field" &&
        column.ucd?.toLowerCase().startsWith("time.epoch")),
  );
  const date = candidates.find(([, index]) => holds(table, index, /^\d{4}-\d{2}-\d{2}$/));
  const clock = candidates.find(([, index]) =>
    holds(table, index, /^\d{2}:\d{2}(?::\d{2}(?:\.\d+)?)?\s*(?:Z|UTC)?$/i),
  );
  if (date !== undefined && clock !== undefined) {
    assign(at, date[1], "date", "synonym");
    assign(at, clock[1], "timeOfDay", "synonym");
    return;
  }
  const [best] = candidates.toSorted(([a], [b]) => remoteness(a) - remoteness(b));
  if (best === undefined) return;
  const [{ name, kind }, index] = best;
  const byName = isTimeName(name) || isFitsTime(name) || readTimeWords(name) !== null;
  assign(at, index, "observedAt", byName ? "synonym" : kind === "time" ? "unit" : "ucd");
}

/** Whether each cell is of a form, and one at least is there. */
function holds({ rows }: Table, index: number, form: RegExp): boolean {
  const there = rows
    .map(({ cells }) => cells[index] ?? null)
    .filter((cell) => cell !== null && cell !== "");
  return there.length > 0 && there.every((cell) => form.test(String(cell)));
}

/** Times at the observer go before others, and among them UTC. */
function remoteness({ name, timeReference, timeScale }: RawColumn): number {
  const words = readTimeWords(name);
  const reference = timeReference ?? words?.reference ?? "topocenter";
  const scale = timeScale ?? words?.scale ?? "utc";
  return (
    (reference === "topocenter" || reference === "geocenter" ? 0 : 2) + (scale === "utc" ? 0 : 1)
  );
}

/** The columns of results: by the names of what is measured, by UCD and unit, or by their errors. */
function assignValues(at: Assignment): void {
  const { scope } = at;
  if (has(at, "value", "count", "occurred")) return;
  const single = scope.measurand ?? null;
  const named = open(at).flatMap(([column, index]) => {
    const target = scope.named.get(plainName(column.name));
    return target === undefined ? [] : [{ index, target }];
  });
  const rowsSay = single !== null || has(at, "measurand", "observable");
  for (const { index, target } of named) {
    const field = resultField(target.observable);
    const isPlain = named.length === 1 && (rowsSay || isOnly(at.scope, target.key));
    assign(at, index, isPlain ? field : `${field}@${target.key}`, "name");
  }
  if (named.length === 0) assignByUcdOrUnit(at, rowsSay);
}

/** Where a campaign has one quantity, nothing has to say that a value is of it. */
function isOnly({ observables }: MatchScope, key: string): boolean {
  return observables.length === 1 && observables[0]!.key === key;
}

function assignByUcdOrUnit(at: Assignment, rowsSay: boolean): void {
  const { observables } = at.scope;
  const stems = new Set(
    open(at).flatMap(([{ name }]) => partNames(name).map(({ stem }) => plainName(stem))),
  );
  const isPart = (name: string) =>
    partNames(name).some(
      ({ stem }) =>
        stem !== "" && at.table.columns.some((one) => plainName(one.name) === plainName(stem)),
    );
  const candidates = open(at).flatMap(([column, index]) => {
    const { name, unit, ucd, kind } = column;
    if (isPart(name) || kind === "text" || kind === "boolean" || kind === "time") return [];
    const said = ucdField(ucd);
    if (said !== null && said.kind !== "value") return [];
    const fits = observables.filter((one) => fitsUnit(unit, one) !== false);
    const sure = fits.filter((one) => fitsUnit(unit, one) === true);
    const paired = stems.has(plainName(name));
    if (said === null && sure.length === 0 && !paired) return [];
    const why =
      said !== null ? ("ucd" as const) : sure.length > 0 ? ("unit" as const) : ("synonym" as const);
    return fits.length === 0 ? [] : [{ index, why, paired, of: sure.length > 0 ? sure : fits }];
  });
  // A column with an error of its own is a value before one without.
  const withErrors = candidates.filter(({ paired }) => paired);
  const values = withErrors.length > 0 ? withErrors : candidates;
  const [only] = values;
  if (
    values.length === 1 &&
    only !== undefined &&
    (rowsSay || at.scope.observables.length === 1 || only.of.length > 1)
  ) {
    assign(at, only.index, resultField(only.of[0]!), only.why);
    return;
  }
  if (rowsSay) return;
  for (const { index, why, of } of values) {
    const [observable] = of;
    const others = values.filter((one) => one.index !== index && one.of.includes(observable!));
    if (of.length !== 1 || observable === undefined || others.length > 0) continue;
    assign(at, index, `${resultField(observable)}@${observable.key}`, why);
  }
}

const OF_ONE_VALUE = ["sd", "sdDex", "plus", "minus", "limit", "upperLimit", "lowerLimit", "unit"];

/** Where results stand side by side, an uncertainty that names none is the only one's, or nobody's. */
function giveToOne(at: Assignment): void {
  const values = valuesOf(at);
  if (values.length === 0 || values.some(({ target }) => target === "")) return;
  at.fields.forEach((one, index) => {
    if (one === null || one.why === "chosen" || one.why === "remembered") return;
    if (!OF_ONE_VALUE.includes(one.field)) return;
    const [only] = values;
    const field = `${one.field}@${only!.target}`;
    at.fields[index] = values.length === 1 ? { ...one, field } : null;
  });
}

type Value = { name: string; field: string; target: string };

/** Columns of results: where their uncertainties and limits belong. */
function valuesOf({ table, fields }: Assignment): Value[] {
  return fields.flatMap((one, index) => {
    const [field = "", target = ""] = one?.field.split("@") ?? [];
    if (!["value", "count", "occurred"].includes(field)) return [];
    return [{ name: table.columns[index]!.name, field, target }];
  });
}

function assignParts(at: Assignment): void {
  const values = valuesOf(at);
  const found = open(at).flatMap(([{ name }, index]) => {
    for (const part of partNames(name)) {
      const value = valueOfStem(part.stem, values, at.scope);
      if (value === null) continue;
      if (part.role === "limit" && !holdsLimits(at.table, index)) continue;
      return [{ index, value, ...part }];
    }
    return [];
  });
  for (const { index, value, role, letter } of found) {
    const other = found.some(
      (one) => one.value === value && one.letter !== null && one.letter !== letter,
    );
    // As VizieR's catalogues have it: E_ above and e_ below where there are both, e_ alone for both.
    const own = letter === null || !other ? role : letter === "E" ? "plus" : "minus";
    assign(at, index, value.target === "" ? own : `${own}@${value.target}`, "synonym");
  }
}

function valueOfStem(stem: string, values: Value[], scope: MatchScope): Value | null {
  const plain = plainName(stem);
  if (plain === "") return values.length === 1 ? values[0]! : null;
  const byName = values.find(({ name }) => plainName(name) === plain);
  if (byName !== undefined) return byName;
  const key = scope.named.get(plain)?.key;
  return values.find(({ target }) => target !== "" && target === key) ?? null;
}

/** A flag is a limit's only where every cell says so; else it flags something else. */
function holdsLimits({ rows }: Table, index: number): boolean {
  return rows.every(({ cells }) => isLimitWord(cells[index] ?? null));
}

function assignErrorsByUcd(at: Assignment): void {
  if (has(at, "sd", "plus", "minus", "sdDex")) return;
  const values = valuesOf(at).filter(({ target }) => target === "");
  const [value] = values;
  if (value === undefined) return;
  const ucd = at.table.columns.find(({ name }) => name === value.name)?.ucd?.toLowerCase() ?? "";
  const errors = open(at).filter(([column]) => {
    const said = ucdField(column.ucd);
    return (
      said?.kind === "error" && (said.of === "" || ucd === "" || ucd.split(";")[0] === said.of)
    );
  });
  if (errors.length === 1) assign(at, errors[0]![1], "sd", "ucd");
}
