import type { DerivedForm, Measurand, Observable, Reference } from "../document";
import { compileExpression } from "../expression";
import type { Legible } from "../form";
import { compareInstants } from "../instants";
import { below } from "../pointer";
import { checkReserved } from "./declarations";
import { legible } from "./reading";
import type { Reading } from "./reading";

/** Measurands and derived values: window, conditions, shape and reference fit their observable. */
export function checkMeasurands(reading: Reading): void {
  for (const [index, measurand] of legible(reading.form.measurands)) {
    checkMeasurand(reading, measurand, below("/measurands", index));
  }
  for (const [index, derived] of legible(reading.form.derived)) {
    checkDerived(reading, derived, below("/derived", index));
  }
}

function checkMeasurand(reading: Reading, measurand: Legible<Measurand>, pointer: string): void {
  const { observables } = reading;
  reading.refer(below(pointer, "observable"), measurand.observable, observables, "observable");
  const observable = reading.observableOf(measurand.key);
  checkWindow(reading, measurand, pointer);
  checkWhere(reading, measurand, observable, pointer);
  checkScaleOf(reading, measurand, observable, pointer);
  const reference = measurand.reference;
  checkReference(reading, {
    reference,
    measurand,
    observable,
    pointer: below(pointer, "reference"),
  });
  const earlier = new Set<string>();
  for (const [index, threshold] of legible(measurand.thresholds)) {
    const at = below(pointer, "thresholds", index);
    reading.distinct(below(at, "key"), threshold.key, earlier, "the threshold");
    positiveOnLog10(reading, threshold.value, observable, below(at, "value"));
  }
  const replacedBy = measurand.closed?.replacedBy;
  reading.refer(
    below(pointer, "closed", "replacedBy"),
    replacedBy,
    reading.measurands,
    "measurand",
  );
}

function checkWindow(reading: Reading, measurand: Legible<Measurand>, pointer: string): void {
  const { from, to } = measurand.window ?? {};
  if (typeof from !== "string" || typeof to !== "string" || compareInstants(from, to) <= 0) return;
  reading.refuse(below(pointer, "window", "to"), "out-of-range", to, `a time not before ${from}`);
}

function checkWhere(
  reading: Reading,
  measurand: Legible<Measurand>,
  observable: Legible<Observable> | undefined,
  pointer: string,
): void {
  const known = observable === undefined ? null : conditionKeys(observable);
  for (const [name, range] of Object.entries(measurand.where ?? {})) {
    const at = below(pointer, "where", name);
    if (known !== null) reading.refer(at, name, known, "condition");
    const [lower, upper] = range ?? [];
    if (typeof lower !== "number" || typeof upper !== "number" || lower <= upper) continue;
    reading.refuse(at, "out-of-range", `${lower} to ${upper}`, "a lower end not above the upper");
  }
}

export function conditionKeys(observable: Legible<Observable>): ReadonlySet<string> {
  const keys = new Set<string>();
  for (const [, { key }] of legible(observable.conditions)) if (key !== undefined) keys.add(key);
  return keys;
}

/** One truth per event, one rate per count: neither is a curve, and neither flickers. */
function checkScaleOf(
  reading: Reading,
  measurand: Legible<Measurand>,
  observable: Legible<Observable> | undefined,
  pointer: string,
): void {
  const scale = observable?.scale;
  if (scale !== "event" && scale !== "count") return;
  if (measurand.shape === "curve") {
    const found = `a curve on the scale ${scale}`;
    reading.refuse(below(pointer, "shape"), "not-applicable", found, "constant");
  }
  if (measurand.scatter !== undefined && measurand.scatter > 0) {
    const found = `scatter on the scale ${scale}`;
    reading.refuse(below(pointer, "scatter"), "not-applicable", found, "0");
  }
}

type ReferencePlace = {
  reference: Legible<Reference> | null | undefined;
  measurand: Legible<Measurand> | null;
  observable: Legible<Observable> | undefined;
  pointer: string;
};

function checkReference(reading: Reading, place: ReferencePlace): void {
  const { reference, observable, pointer } = place;
  const scale = observable?.scale;
  if (reference === undefined || scale === undefined) return;
  if (reference === null) {
    if (scale === "event" || scale === "cyclic") return;
    const allowed = "a reference: what one would expect knowing none of the hypotheses";
    reading.refuse(pointer, "missing", "nothing", allowed);
    return;
  }
  const families = familiesByScale[scale];
  const { family } = reference;
  if (family !== undefined && !families.includes(family)) {
    const allowed =
      families.length === 0 ? "none: silence on an event is 1/2" : families.join(", ");
    const found = `a ${family} reference on the scale ${scale}`;
    reading.refuse(pointer, "not-applicable", found, allowed);
    return;
  }
  checkFamily(reading, reference, place);
}

const familiesByScale: Record<Observable["scale"], Reference["family"][]> = {
  linear: ["uniform", "normal", "polynomial"],
  log10: ["uniform", "normal", "polynomial"],
  magnitude: ["uniform", "normal", "polynomial"],
  cyclic: ["uniform", "normal"],
  count: ["gamma", "uniform"],
  event: [],
};

function checkFamily(reading: Reading, reference: Legible<Reference>, place: ReferencePlace): void {
  const { observable, pointer } = place;
  switch (reference.family) {
    case "uniform": {
      const { lower, upper } = reference;
      checkRange(reading, { lower, upper, observable, pointer });
      if (observable?.scale === "count" && lower !== undefined && lower < 0) {
        const at = below(pointer, "lower");
        reading.refuse(at, "out-of-range", String(lower), "a rate of at least 0");
      }
      break;
    }
    case "normal":
      positiveOnLog10(reading, reference.mean, observable, below(pointer, "mean"));
      break;
    case "polynomial":
      positiveOnLog10(reading, reference.centre, observable, below(pointer, "centre"));
      checkPolynomial(reading, reference.in, place);
      break;
    default:
  }
}

/** Lower below upper; on a circle only not the same, since a range may run through its end. */
export function checkRange(
  reading: Reading,
  range: {
    lower: number | undefined;
    upper: number | undefined;
    observable: Legible<Observable> | undefined;
    pointer: string;
  },
): void {
  const { lower, upper, observable, pointer } = range;
  // Without a known scale it may be a circle.
  const cyclic = observable?.scale === undefined || observable.scale === "cyclic";
  positiveOnLog10(reading, lower, observable, below(pointer, "lower"));
  if (lower === undefined || upper === undefined) return;
  const period = observable?.period;
  if (cyclic && typeof period === "number" && Math.abs(upper - lower) > period) {
    const allowed = `at most ${period} from ${lower}, once around`;
    reading.refuse(below(pointer, "upper"), "out-of-range", String(upper), allowed);
    return;
  }
  if (cyclic ? lower !== upper : lower < upper) return;
  const allowed = cyclic ? `another end than ${lower}` : `a number above ${lower}`;
  reading.refuse(below(pointer, "upper"), "out-of-range", String(upper), allowed);
}

export function positiveOnLog10(
  reading: Reading,
  value: number | undefined,
  observable: Legible<Observable> | undefined,
  pointer: string,
): void {
  if (observable?.scale !== "log10" || value === undefined || value > 0) return;
  reading.refuse(pointer, "not-positive", String(value), "a number above 0 on the scale log10");
}

function checkPolynomial(
  reading: Reading,
  condition: string | undefined,
  { measurand, observable, pointer }: ReferencePlace,
): void {
  if (measurand === null || measurand.shape === "constant") {
    const found = "a polynomial on a constant";
    reading.refuse(pointer, "not-applicable", found, "uniform or normal, or the shape curve");
  }
  if (condition === undefined) return;
  if (observable !== undefined) {
    reading.refer(below(pointer, "in"), condition, conditionKeys(observable), "condition");
  }
  const range = measurand?.where?.[condition];
  if (measurand?.where === undefined || (range === undefined && condition in measurand.where))
    return;
  const [lower, upper] = range ?? [null, null];
  if (lower !== null && upper !== null && (lower === undefined || upper === undefined)) return;
  if (lower !== null && upper !== null && lower! < upper!) return;
  reading.refuse(
    pointer.replace(/reference$/, "where"),
    "missing",
    `no range of ${condition}, which the polynomial reference runs over`,
    `"${condition}": [lower, upper]`,
  );
}

function checkDerived(reading: Reading, derived: Legible<DerivedForm>, pointer: string): void {
  const { observables, measurands } = reading;
  reading.refer(below(pointer, "observable"), derived.observable, observables, "observable");
  const observable = reading.observableOf(derived.key);
  if (observable?.scale === "event" || observable?.scale === "count") {
    const found = `a derived value on the scale ${observable.scale}`;
    const allowed = "an observable on linear, log10, magnitude or cyclic";
    reading.refuse(below(pointer, "observable"), "not-applicable", found, allowed);
  } else {
    const { reference } = derived;
    const at = below(pointer, "reference");
    checkReference(reading, { reference, measurand: null, observable, pointer: at });
  }
  for (const [name, key] of Object.entries(derived.from ?? {})) {
    const at = below(pointer, "from", name);
    checkReserved(reading, name, at);
    if (key !== undefined && reading.derived.has(key) && !measurands.has(key)) {
      const allowed = "a measurand: a derived value has no measurements of its own";
      reading.refuse(at, "not-applicable", `the derived value ${key}`, allowed);
    } else {
      reading.refer(at, key, measurands, "measurand");
      checkInput(reading, key, at);
    }
  }
  checkFormula(reading, derived, pointer);
}

/** A derived value's expression: it parses, and there is something that it is derived from. */
function checkFormula(reading: Reading, derived: Legible<DerivedForm>, pointer: string): void {
  if (derived.expression === undefined || derived.from === undefined) return;
  const names = new Set(Object.keys(derived.from));
  const compiled = compileExpression(derived.expression, { names });
  if (compiled.ok) {
    if (compiled.expression.names.size > 0) return;
    const found = "an expression that names no input";
    const allowed = names.size === 0 ? "names that from declares" : [...names].join(", ");
    reading.refuse(below(pointer, "expression"), "bad-expression", found, allowed);
    return;
  }
  for (const { found, allowed } of compiled.faults) {
    reading.refuse(below(pointer, "expression"), "bad-expression", found, allowed);
  }
}

/** An input has one combined value: a constant quantity, no event, no count. */
function checkInput(reading: Reading, key: string | undefined, pointer: string): void {
  const measurand = key === undefined ? undefined : reading.measurands.get(key);
  if (measurand === undefined) return;
  const scale = reading.observableOf(key)?.scale;
  if (measurand.shape === "curve" || scale === "event" || scale === "count") {
    const what = measurand.shape === "curve" ? "the curve" : `the ${scale}`;
    reading.refuse(
      pointer,
      "not-applicable",
      `${what} ${key}`,
      "a constant measurand with a value",
    );
  }
}
