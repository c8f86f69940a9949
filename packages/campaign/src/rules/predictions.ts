import type { Hypothesis, Observable, Prediction, Tolerance } from "../document";
import type { Legible } from "../form";
import { below } from "../pointer";
import { checkExpression, isWhole } from "./expressions";
import { checkRange, conditionKeys, positiveOnLog10 } from "./measurands";
import type { PredictionPlace } from "./prediction-place";
import { legible } from "./reading";
import type { Reading } from "./reading";

/** Each measurand predicted once, and with what its scale asks for. */
export function checkPredictions(
  reading: Reading,
  hypothesis: Legible<Hypothesis>,
  hypothesisPointer: string,
  predictable: ReadonlyMap<string, unknown>,
): void {
  const earlier = new Set<string>();
  const whole = isWhole(hypothesis);
  const faults = reading.problems
    .map(({ pointer }) => pointer)
    .filter((pointer) => pointer.startsWith(`${hypothesisPointer}/`));
  for (const [index, prediction] of legible(hypothesis.predictions)) {
    const pointer = below(hypothesisPointer, "predictions", index);
    const key = prediction.measurand;
    reading.refer(below(pointer, "measurand"), key, predictable, "measurand");
    reading.distinct(below(pointer, "measurand"), key, earlier, "a prediction of");
    checkGiven(reading, prediction, pointer);
    const place: PredictionPlace = {
      hypothesis,
      hypothesisPointer,
      prediction,
      pointer,
      faults,
      whole,
      observable: reading.observableOf(key),
      measurand: key === undefined ? undefined : reading.measurands.get(key),
    };
    if (place.observable?.scale === "event") checkEvent(reading, place);
    else checkQuantity(reading, place);
  }
}

function checkGiven(reading: Reading, prediction: Legible<Prediction>, pointer: string): void {
  const key = prediction.given?.measurand;
  if (key === undefined) return;
  const at = below(pointer, "given", "measurand");
  reading.refer(at, key, reading.measurands, "measurand");
  const scale = reading.observableOf(key)?.scale;
  if (key === prediction.measurand) {
    reading.refuse(at, "contradiction", `${key}, which is predicted itself`, "another measurand");
  } else if (scale !== undefined && scale !== "event") {
    reading.refuse(at, "not-applicable", `${key}, on the scale ${scale}`, "an event's measurand");
  }
}

function checkEvent(reading: Reading, { prediction, pointer }: PredictionPlace): void {
  const { probability } = prediction;
  for (const field of ["expected", "tolerance"] as const) {
    if (prediction[field] === null || prediction[field] === undefined) continue;
    const found = `${field} of an event`;
    reading.refuse(below(pointer, field), "not-applicable", found, "a probability");
  }
  if (probability === null) {
    const allowed = "a number above 0 and below 1: how probable the event is";
    reading.refuse(below(pointer, "probability"), "missing", "nothing", allowed);
  } else if (probability !== undefined && !(probability > 0 && probability < 1)) {
    const allowed = "a number above 0 and below 1: nothing is certain beforehand";
    reading.refuse(below(pointer, "probability"), "out-of-range", String(probability), allowed);
  }
}

function checkQuantity(reading: Reading, place: PredictionPlace): void {
  const { prediction, pointer, observable } = place;
  const { expected, tolerance, probability } = prediction;
  if (observable?.scale !== undefined && typeof probability === "number") {
    const found = `a probability on the scale ${observable.scale}`;
    const allowed = "expected, or a tolerance with bounds; a probability is for events";
    reading.refuse(below(pointer, "probability"), "not-applicable", found, allowed);
  }
  if (typeof expected === "number") {
    positiveOnLog10(reading, expected, observable, below(pointer, "expected"));
    if (observable?.scale === "count" && expected < 0) {
      const at = below(pointer, "expected");
      reading.refuse(at, "out-of-range", String(expected), "a rate of at least 0");
    }
  } else if (typeof expected === "string") {
    checkExpression(reading, place, expected);
  }
  if (tolerance === undefined || expected === undefined) return;
  if (tolerance !== null) checkTolerance(reading, place, tolerance);
  if (expected !== null || (tolerance !== null && hasBounds(tolerance))) return;
  // Without a known scale it may be an event that is meant.
  if (observable?.scale === undefined) return;
  const allowed =
    observable.scale === "count"
      ? "a number or an expression, or a gamma tolerance"
      : "a number or an expression, or a tolerance with bounds (interval, atMost, atLeast)";
  reading.refuse(below(pointer, "expected"), "missing", "nothing", allowed);
}

/** The families that say by themselves where the true value lies. */
function hasBounds(tolerance: Legible<Tolerance>): boolean {
  return (
    tolerance.family === "interval" ||
    tolerance.family === "atMost" ||
    tolerance.family === "atLeast" ||
    tolerance.family === "gamma"
  );
}

const familiesByScale: Record<Observable["scale"], Tolerance["family"][]> = {
  linear: ["normal", "interval", "atMost", "atLeast", "splitNormal"],
  log10: ["normal", "interval", "atMost", "atLeast", "splitNormal"],
  magnitude: ["normal", "interval", "atMost", "atLeast", "splitNormal"],
  cyclic: ["normal", "interval", "splitNormal"],
  count: ["gamma"],
  event: [],
};

function checkTolerance(
  reading: Reading,
  place: PredictionPlace,
  tolerance: Legible<Tolerance>,
): void {
  const { prediction, observable } = place;
  const pointer = below(place.pointer, "tolerance");
  const { family } = tolerance;
  const scale = observable?.scale;
  if (family !== undefined && scale !== undefined && !familiesByScale[scale].includes(family)) {
    const allowed = [...familiesByScale[scale], "or none: exact"].join(", ");
    reading.refuse(pointer, "not-applicable", `${family} on the scale ${scale}`, allowed);
    return;
  }
  if (hasBounds(tolerance) && prediction.expected !== null) {
    const found = `expected beside the tolerance ${family}`;
    const allowed = "one of the two: such a tolerance says by itself where the value lies";
    reading.refuse(below(place.pointer, "expected"), "contradiction", found, allowed);
  }
  switch (family) {
    case "normal":
      checkNormal(reading, place, tolerance);
      break;
    case "interval":
      checkRange(reading, { lower: tolerance.lower, upper: tolerance.upper, observable, pointer });
      break;
    case "atMost":
    case "atLeast":
      checkOneSided(reading, place, tolerance);
      break;
    default:
  }
}

type Of<F extends Tolerance["family"]> = Legible<Extract<Tolerance, { family: F }>>;

function checkNormal(reading: Reading, place: PredictionPlace, tolerance: Of<"normal">): void {
  const { observable, measurand } = place;
  const pointer = below(place.pointer, "tolerance");
  if (tolerance.relative === true && observable?.scale === "cyclic") {
    const found = "a relative tolerance on the scale cyclic";
    reading.refuse(below(pointer, "relative"), "not-applicable", found, "false");
  }
  const { sharing } = tolerance;
  if (sharing === undefined) return;
  for (const field of ["in", "length"] as const) {
    const value = tolerance[field];
    if (sharing === "smooth" && value === null) {
      const allowed = field === "in" ? "a condition of the observable" : "a number above 0";
      reading.refuse(below(pointer, field), "missing", "nothing", `${allowed}, for smooth`);
    } else if (sharing !== "smooth" && value !== null && value !== undefined) {
      const found = `${field} with the sharing ${sharing}`;
      reading.refuse(below(pointer, field), "not-applicable", found, `${field} with smooth only`);
    }
  }
  if (sharing !== "smooth") return;
  if (measurand?.shape === "constant" || reading.derived.has(place.prediction.measurand ?? "")) {
    const found = "a smooth tolerance on a constant";
    reading.refuse(below(pointer, "sharing"), "not-applicable", found, "common or each");
  } else if (observable !== undefined) {
    reading.refer(below(pointer, "in"), tolerance.in, conditionKeys(observable), "condition");
  }
}

/** Uniform from the bound to the reference's far end: so there must be one, beyond the bound. */
function checkOneSided(
  reading: Reading,
  place: PredictionPlace,
  tolerance: Of<"atMost"> | Of<"atLeast">,
): void {
  const { observable, prediction } = place;
  const pointer = below(place.pointer, "tolerance");
  const { bound, family } = tolerance;
  positiveOnLog10(reading, bound, observable, below(pointer, "bound"));
  const key = prediction.measurand ?? "";
  const target = reading.measurands.get(key) ?? reading.derived.get(key);
  const reference = target?.reference;
  if (reference === undefined) return;
  if (reference?.family !== "uniform") {
    const found = `${family} on ${key}, whose reference is ${reference?.family ?? "none"}`;
    const allowed = "a one-sided tolerance where the reference is uniform";
    reading.refuse(pointer, "not-applicable", found, allowed);
    return;
  }
  const end = family === "atMost" ? reference.lower : reference.upper;
  if (bound === undefined || end === undefined) return;
  if (family === "atMost" ? bound > end : bound < end) return;
  const allowed = `a bound ${family === "atMost" ? "above" : "below"} the reference's end ${end}`;
  reading.refuse(below(pointer, "bound"), "out-of-range", String(bound), allowed);
}
