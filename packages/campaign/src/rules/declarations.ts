import { timeUnits } from "../conditions";
import type { Condition, Observable } from "../document";
import { isReserved } from "../expression-words";
import type { Legible } from "../form";
import { compareInstants } from "../instants";
import { below } from "../pointer";
import { legible } from "./reading";
import type { Reading } from "./reading";

/** The campaign's own fields, observables with their conditions, and the plain lists. */
export function checkDeclarations(reading: Reading): void {
  checkRule(reading);
  checkUnique(reading);
  for (const [index, observable] of legible(reading.form.observables)) {
    checkObservable(reading, observable, below("/observables", index));
  }
}

function checkRule(reading: Reading): void {
  const rule = reading.form.campaign?.rule;
  if (rule?.pass === undefined || rule.fail === undefined || rule.fail < rule.pass) return;
  reading.refuse("/campaign/rule/fail", "out-of-range", String(rule.fail), `below ${rule.pass}`);
}

/** Keys once in their list; measurands and derived values share one. */
function checkUnique(reading: Reading): void {
  const { form } = reading;
  const quantities = new Set<string>();
  const lists = [
    ["observables", "the observable", form.observables, new Set<string>()],
    ["measurands", "the measurand", form.measurands, quantities],
    ["derived", "the measurand or derived value", form.derived, quantities],
    ["sharedErrors", "the shared error", form.sharedErrors, new Set<string>()],
    ["facilities", "the facility", form.facilities, new Set<string>()],
    ["teams", "the team", form.teams, new Set<string>()],
    ["hypotheses", "the hypothesis", form.hypotheses, new Set<string>()],
  ] as const;
  for (const [member, noun, list, earlier] of lists) {
    for (const [index, item] of legible<{ key?: string | undefined }>(list)) {
      reading.distinct(below("", member, index, "key"), item.key, earlier, noun);
    }
  }
}

function checkObservable(reading: Reading, observable: Legible<Observable>, pointer: string): void {
  const { scale, unit, period } = observable;
  if (scale !== undefined && scale !== "event" && unit === null) {
    reading.refuse(below(pointer, "unit"), "missing", "nothing", "a unit; 1 for a bare number");
  }
  if (scale === "cyclic" && period === null) {
    reading.refuse(below(pointer, "period"), "missing", "nothing", "a number above 0");
  }
  if (scale !== undefined && scale !== "cyclic" && typeof period === "number") {
    const found = `a period on the scale ${scale}`;
    reading.refuse(below(pointer, "period"), "not-applicable", found, "one on cyclic only");
  }
  const earlier = new Set<string>();
  for (const [index, condition] of legible(observable.conditions)) {
    const at = below(pointer, "conditions", index);
    reading.distinct(below(at, "key"), condition.key, earlier, "the condition");
    checkReserved(reading, condition.key, below(at, "key"));
    checkTime(reading, condition, at);
  }
}

/** A name for expressions that is a function's or a constant's. */
export function checkReserved(reading: Reading, name: string | undefined, pointer: string): void {
  if (name === undefined || !isReserved(name)) return;
  const found = `the name ${name}, which expressions have for their own`;
  reading.refuse(pointer, "contradiction", found, "no function's or constant's name");
}

function checkTime(reading: Reading, condition: Legible<Condition>, pointer: string): void {
  const { time, unit } = condition;
  if (time === null || time === undefined) return;
  const at = below(pointer, "time");
  const { epoch, table } = time;
  if ((epoch === null) === (table === null)) {
    const found = epoch === null ? "neither epoch nor table" : "both epoch and table";
    reading.refuse(at, "contradiction", found, "one of epoch and table");
  }
  if (typeof epoch === "string" && unit !== undefined && !Object.hasOwn(timeUnits, unit ?? "")) {
    const found = unit === null ? "nothing" : JSON.stringify(unit);
    const allowed = "d, h or s: a time since an epoch is counted in them";
    reading.refuse(
      below(pointer, "unit"),
      unit === null ? "missing" : "bad-choice",
      found,
      allowed,
    );
  }
  let last: string | undefined;
  for (const [index, row] of legible(table ?? [])) {
    const when = row[0];
    if (when === undefined) continue;
    if (last !== undefined && compareInstants(when, last) <= 0) {
      const place = below(at, "table", index, 0);
      reading.refuse(place, "out-of-range", when, `a time after ${last}`);
    }
    last = when;
  }
}
