import { assign, has, open } from "./assignment";
import type { Assignment, Table } from "./assignment";
import { plainName } from "./field-names";
import { isLimitWord } from "./limit-words";
import type { MatchScope } from "./match-scope";
import { partNames } from "./part-names";
import { ucdField } from "./ucd-fields";

/** Fields that belong to one result, and the results that they may belong to. */
const OF_ONE: Record<string, "value" | "count" | "occurred"> = {
  ...Object.fromEntries(
    ["sd", "sdDex", "plus", "minus", "limit", "upperLimit", "lowerLimit", "unit"].map(
      (field) => [field, "value"] as const,
    ),
  ),
  exposure: "count",
  background: "count",
  efficiency: "occurred",
  falseAlarm: "occurred",
};

/** Where results stand side by side, an uncertainty that names none is the only one's, or nobody's. */
export function giveToOne(at: Assignment): void {
  const values = valuesOf(at);
  if (values.length === 0 || values.some(({ target }) => target === "")) return;
  at.fields.forEach((one, index) => {
    if (one === null || one.why === "chosen" || one.why === "remembered") return;
    const wanted = OF_ONE[one.field];
    if (wanted === undefined) return;
    const [only, second] = values.filter(({ field }) => field === wanted);
    const isClear = only !== undefined && second === undefined;
    at.fields[index] = isClear ? { ...one, field: `${one.field}@${only.target}` } : null;
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

export function assignParts(at: Assignment): void {
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

export function assignErrorsByUcd(at: Assignment): void {
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
