import { ID_PATTERN } from "@weighhouse/campaign/fields";
import { assignErrorsByUcd, assignParts, giveToOne } from "./assign-parts";
import { assignTimes, holds } from "./assign-times";
import { assignValues } from "./assign-values";
import { assign, has, open } from "./assignment";
import type { Assigned, Assignment, Table } from "./assignment";
import {
  FIELDS_OF_SCALE,
  fieldOfName,
  plainName,
  PLAIN_FIELDS,
  RESULT_FIELDS,
} from "./field-names";
import type { MatchScope } from "./match-scope";
import { ucdField } from "./ucd-fields";

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
  assignByUcd(at);
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

/** What a UCD says by itself; of times and results more is asked. */
function assignByUcd(at: Assignment): void {
  const scales = new Set<string>(at.scope.observables.map(({ scale }) => scale));
  for (const [column, index] of open(at)) {
    const said = ucdField(column.ucd);
    if (said?.kind !== "field" || said.field === "observedAt" || has(at, said.field)) continue;
    // A main identifier is mostly an object's: it is a measurement's where each row has its own.
    if (said.field === "id" && !isDistinct(at.table, index)) continue;
    if (isForScale(said.field, scales)) assign(at, index, said.field, "ucd");
  }
}

function isDistinct({ rows }: Table, index: number): boolean {
  const ids = rows.map(({ cells }) => String(cells[index] ?? ""));
  return new Set(ids).size === ids.length && ids.every((id) => ID_PATTERN.test(id));
}
