import { conditionFromTime } from "../conditions";
import type { Condition, Measurement, SharedError } from "../document";
import type { Legible } from "../form";
import { compareInstants } from "../instants";
import { below } from "../pointer";
import { conversion } from "../units";
import { DistinctIds } from "./distinct-ids";
import { conditionsUsed } from "./expressions";
import { conditionKeys } from "./measurands";
import { checkReports } from "./reports";
import { checkResult } from "./results";
import { legible } from "./reading";
import type { Reading } from "./reading";
import type { Target } from "./target";

/** Measurements: known keys, inside window and conditions, a result of one form, a unit that fits. */
export function checkMeasurements(reading: Reading): void {
  const targets = targetsOf(reading);
  const { measurements = [] } = reading.form;
  const ids = new DistinctIds(measurements.length);
  for (let index = 0; index < measurements.length; index++) {
    const measurement = measurements[index];
    if (measurement === undefined) continue;
    const { id, measurand } = measurement;
    if (id !== undefined && !ids.add(id)) {
      const place = below("/measurements", index, "id");
      reading.refuse(place, "duplicate", `the id ${id} a second time`, "each id once");
    }
    const target = measurand === undefined ? undefined : targets.get(measurand);
    checkReferences(reading, measurement, target, index);
    if (target !== undefined) checkAgainst(reading, measurement, target, index);
    else checkTarget(reading, measurement, index);
    checkResult(reading, measurement, target, index);
  }
  checkReports(reading);
}

function checkTarget(reading: Reading, measurement: Legible<Measurement>, index: number): void {
  const { measurand } = measurement;
  const place = below("/measurements", index, "measurand");
  if (measurand !== undefined && reading.derived.has(measurand)) {
    const found = `the derived value ${measurand}`;
    reading.refuse(place, "not-applicable", found, "a measurand: derived values are computed");
    return;
  }
  reading.refer(place, measurand, reading.measurands, "measurand");
}

/** Pointers are made only for what is refused: a long list is nearly always right. */
function checkReferences(
  reading: Reading,
  measurement: Legible<Measurement>,
  target: Target | undefined,
  index: number,
): void {
  const { facility, team, shared, batch } = measurement;
  if (typeof facility === "string" && !reading.facilities.has(facility)) {
    const place = below("/measurements", index, "facility");
    reading.refer(place, facility, reading.facilities, "facility");
  }
  if (typeof team === "string" && !reading.teams.has(team)) {
    reading.refer(below("/measurements", index, "team"), team, reading.teams, "team");
  }
  if (shared === undefined || shared.length === 0) return;
  const known = target?.loadings.get(shared);
  if (known === "right" || (known === "right in a batch" && batch !== null)) return;
  const before = reading.problems.length;
  checkShared(reading, measurement, index);
  if (target === undefined || target.loadings.size >= LOADINGS_KEPT) return;
  if (reading.problems.length > before) return;
  target.loadings.set(shared, batch === null ? "right" : "right in a batch");
}

const LOADINGS_KEPT = 1000;

function checkShared(reading: Reading, measurement: Legible<Measurement>, index: number): void {
  const { shared = [] } = measurement;
  for (let position = 0; position < shared.length; position++) {
    const key = shared[position]?.error;
    if (key === undefined) continue;
    const error = reading.sharedErrors.get(key);
    const again = shared.findIndex((one) => one?.error === key) < position;
    if (error !== undefined && !again && isLoadable(reading, measurement, error)) continue;
    const place = below("/measurements", index, "shared", position, "error");
    if (again) {
      const found = `the shared error ${key} a second time`;
      reading.refuse(place, "duplicate", found, "each key once");
    }
    if (error === undefined) reading.refer(place, key, reading.sharedErrors, "shared error");
    else refuseLoading(reading, { measurement, error, place, index });
  }
}

/** Whether a shared error can shift this measurement. */
function isLoadable(
  reading: Reading,
  { measurand, batch }: Legible<Measurement>,
  error: Legible<SharedError>,
): boolean {
  if (error.per === "batch" && batch === null) return false;
  const scale = reading.observableOf(measurand)?.scale;
  return scale !== "event" && scale !== "count" && !(scale === "cyclic" && error.relative);
}

function refuseLoading(
  reading: Reading,
  at: {
    measurement: Legible<Measurement>;
    error: Legible<SharedError>;
    place: string;
    index: number;
  },
): void {
  const { measurement, error, place, index } = at;
  const scale = reading.observableOf(measurement.measurand)?.scale;
  if (error.per === "batch" && measurement.batch === null) {
    const found = `nothing, with the shared error ${error.key}, drawn per batch`;
    reading.refuse(below("/measurements", index, "batch"), "missing", found, "a batch");
  }
  if (scale === "event" || scale === "count") {
    const found = `a shared error on the scale ${scale}`;
    reading.refuse(place, "not-applicable", found, "none: it shifts values");
  } else if (scale === "cyclic" && error.relative === true) {
    const found = `the relative shared error ${error.key} on the scale cyclic`;
    reading.refuse(place, "not-applicable", found, "one whose relative is false");
  }
}

function checkAgainst(
  reading: Reading,
  measurement: Legible<Measurement>,
  target: Target,
  index: number,
): void {
  const { observedAt, unit, conditions } = measurement;
  if (typeof observedAt === "string") checkWindow(reading, observedAt, target, index);
  if (unit !== null && unit !== undefined) checkUnit(reading, unit, target, index);
  if (conditions === undefined || target.conditions.size === 0) {
    for (const name in conditions) refuseCondition(reading, name, target, index);
    return;
  }
  checkConditions(reading, { measurement, conditions, target, index });
}

/** Window ends are inclusive. */
function checkWindow(reading: Reading, observedAt: string, target: Target, index: number): void {
  const { from, to } = target.measurand.window ?? {};
  const early = typeof from === "string" && compareInstants(observedAt, from) < 0;
  const late = typeof to === "string" && compareInstants(observedAt, to) > 0;
  if (!early && !late) return;
  const allowed = `from ${from ?? "any time"} to ${to ?? "any time"}, the window of ${target.key}`;
  reading.refuse(
    below("/measurements", index, "observedAt"),
    "outside-window",
    observedAt,
    allowed,
  );
}

function checkUnit(reading: Reading, unit: string, target: Target, index: number): void {
  const wanted = target.observable?.unit;
  if (wanted === null || wanted === undefined || unit === wanted) return;
  if (conversion(unit, wanted).kind !== "other-dimension") return;
  const allowed = `${wanted} or a unit of its dimension`;
  const found = `the unit ${unit}`;
  reading.refuse(below("/measurements", index, "unit"), "wrong-dimension", found, allowed);
}

function refuseCondition(reading: Reading, name: string, target: Target, index: number): void {
  if (target.observable === undefined) return;
  const place = below("/measurements", index, "conditions", name);
  reading.refer(place, name, target.conditions, "condition");
}

type Conditioned = {
  measurement: Legible<Measurement>;
  conditions: Legible<Record<string, number>>;
  target: Target;
  index: number;
};

function checkConditions(reading: Reading, place: Conditioned): void {
  const { conditions, target, index, measurement } = place;
  for (const name of Object.keys(conditions)) {
    if (!target.conditions.has(name)) refuseCondition(reading, name, target, index);
  }
  const values =
    target.fromTime.length === 0 ? conditions : { ...conditions, ...computed(reading, place) };
  for (const [name, lower, upper] of target.where) {
    const value = values[name];
    if (value === undefined) continue;
    if ((lower === null || value >= lower) && (upper === null || value <= upper)) continue;
    const at = below("/measurements", index, "conditions", name);
    const allowed = `${lower ?? "any"} to ${upper ?? "any"}, the range of ${target.key}`;
    reading.refuse(at, "outside-condition", String(value), allowed);
  }
  // A measurement that is set aside isn't counted: nothing is computed from its conditions.
  if (measurement.setAside !== null) return;
  for (const [name, user] of target.needed) {
    if (name in values) continue;
    const at = below("/measurements", index, "conditions");
    reading.refuse(at, "lacks-condition", `no ${name}`, `a value of ${name}: ${user} uses it`);
  }
}

/** Conditions from the time of observation; a given one must agree, to a millionth. */
function computed(reading: Reading, place: Conditioned): Record<string, number> {
  const { conditions, target, index, measurement } = place;
  const values: Record<string, number> = {};
  const { observedAt } = measurement;
  if (typeof observedAt !== "string") return values;
  for (const condition of target.fromTime) {
    const { key } = condition;
    if (key === undefined) continue;
    const value = conditionFromTime(condition as Condition, observedAt);
    const at = below("/measurements", index, "conditions", key);
    if (value === null) {
      const [first, last] = [condition.time?.table?.[0]?.[0], condition.time?.table?.at(-1)?.[0]];
      const allowed = `a time from ${first} to ${last}, the table of ${key}`;
      const when = below("/measurements", index, "observedAt");
      if (measurement.setAside === null) {
        reading.refuse(when, "outside-condition", observedAt, allowed);
      }
      continue;
    }
    if (Number.isNaN(value)) continue;
    const given = conditions[key];
    if (given !== undefined && Math.abs(given - value) > 1e-6 * Math.max(1, Math.abs(value))) {
      const allowed = `${value}, computed from observedAt; or leave it out`;
      reading.refuse(at, "contradiction", String(given), allowed);
    }
    if (given === undefined) values[key] = value;
  }
  return values;
}

function targetsOf(reading: Reading): Map<string, Target> {
  const needed = conditionsNeeded(reading);
  const targets = new Map<string, Target>();
  for (const [key, measurand] of reading.measurands) {
    const observable = reading.observableOf(key);
    const all = [...legible(observable?.conditions)].map(([, one]) => one);
    const where: Target["where"] = [];
    for (const [name, range] of Object.entries(measurand.where ?? {})) {
      if (range !== undefined) where.push([name, range[0] ?? null, range[1] ?? null]);
    }
    targets.set(key, {
      key,
      measurand,
      observable,
      conditions: observable === undefined ? new Set() : conditionKeys(observable),
      fromTime: all.filter(({ time }) => isComputable(time)),
      where,
      needed: needed.get(key) ?? new Map<string, string>(),
      loadings: new Map(),
    });
  }
  return targets;
}

function isComputable(time: Legible<Condition>["time"]): boolean {
  if (time === null || time === undefined) return false;
  const { epoch, table } = time;
  if (typeof epoch === "string") return true;
  return (
    Array.isArray(table) && table.every((row) => row?.[0] !== undefined && row[1] !== undefined)
  );
}

/** What a curve's predictions and its reference use of its conditions. */
function conditionsNeeded(reading: Reading): Map<string, Map<string, string>> {
  const needed = new Map<string, Map<string, string>>();
  const need = (measurand: string, condition: string, user: string) => {
    const of = needed.get(measurand) ?? new Map<string, string>();
    if (!of.has(condition)) of.set(condition, user);
    needed.set(measurand, of);
  };
  for (const [key, { shape, reference }] of reading.measurands) {
    if (shape !== "curve" || reference?.family !== "polynomial") continue;
    if (reference.in !== undefined) need(key, reference.in, "the polynomial reference");
  }
  for (const [, hypothesis] of legible(reading.form.hypotheses)) {
    for (const [, { measurand, expected, tolerance }] of legible(hypothesis.predictions)) {
      const observable = reading.observableOf(measurand);
      if (measurand === undefined || observable === undefined) continue;
      if (reading.measurands.get(measurand)?.shape !== "curve") continue;
      const conditions = conditionKeys(observable);
      if (typeof expected === "string") {
        for (const name of conditionsUsed(hypothesis, expected, conditions)) {
          need(measurand, name, `the prediction of ${hypothesis.key}`);
        }
      }
      if (tolerance?.family !== "normal" || typeof tolerance.in !== "string") continue;
      if (conditions.has(tolerance.in)) {
        need(measurand, tolerance.in, `the smooth tolerance of ${hypothesis.key}`);
      }
    }
  }
  return needed;
}
