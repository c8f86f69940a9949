import type { Measurement, Observable, Scale } from "../document";
import type { Legible } from "../form";
import { below } from "../pointer";
import { conversion } from "../units";
import type { Reading } from "./reading";
import type { Target } from "./target";

type Place = {
  reading: Reading;
  measurement: Legible<Measurement>;
  scale: Scale | undefined;
  pointer: string;
};

/** A result is of one form, which its scale allows, and has what the form needs. */
export function checkResult(
  reading: Reading,
  measurement: Legible<Measurement>,
  target: Target | undefined,
  index: number,
): void {
  const scale = target?.observable?.scale;
  if (isOrdinary(measurement, target?.observable)) return;
  const place = { reading, measurement, scale, pointer: below("/measurements", index) };
  const forms = formsOf(measurement);
  const [form] = forms;
  if (form === undefined) {
    const allowed = "one of value, limit with value, occurred, count";
    reading.refuse(place.pointer, "missing", "no result", allowed);
    return;
  }
  if (forms.length > 1) {
    const allowed = "exactly one of value, limit with value, occurred, count";
    reading.refuse(place.pointer, "contradiction", `${forms.join(" and ")}`, allowed);
    return;
  }
  checkBelonging(place, form);
  if (scale !== undefined && !formsByScale[scale].includes(form)) {
    const allowed = `${formsByScale[scale].join(" or ")} on the scale ${scale}`;
    reading.refuse(below(place.pointer, form), "not-applicable", form, allowed);
    return;
  }
  if (form === "value") checkValue(place);
  if (form === "limit") checkLimit(place);
  if (form === "value" || form === "limit") checkSize(place, target);
}

/** The case of nearly every measurement, told in one look. */
function isOrdinary(
  measurement: Legible<Measurement>,
  observable: Legible<Observable> | undefined,
): boolean {
  const { value, sd, sdDex, plus, minus, limit, noise, occurred, count, unit } = measurement;
  const scale = observable?.scale;
  return (
    typeof value === "number" &&
    typeof sd === "number" &&
    sdDex === null &&
    plus === null &&
    minus === null &&
    limit === null &&
    noise === null &&
    occurred === null &&
    count === null &&
    measurement.confidence === null &&
    measurement.sigmas === null &&
    measurement.efficiency === null &&
    measurement.falseAlarm === null &&
    measurement.exposure === null &&
    measurement.background === null &&
    (scale === "linear" ||
      scale === "magnitude" ||
      scale === "cyclic" ||
      (scale === "log10" && value > 0 && (unit === null || unit === observable?.unit)))
  );
}

type ResultForm = "value" | "limit" | "occurred" | "count";

const formsByScale: Record<Scale, ResultForm[]> = {
  linear: ["value", "limit"],
  log10: ["value", "limit"],
  magnitude: ["value", "limit"],
  cyclic: ["value"],
  event: ["occurred"],
  count: ["count"],
};

function formsOf({ value, limit, occurred, count }: Legible<Measurement>): ResultForm[] {
  const forms: ResultForm[] = [];
  if (limit !== null) forms.push("limit");
  else if (value !== null) forms.push("value");
  if (occurred !== null) forms.push("occurred");
  if (count !== null) forms.push("count");
  // A limit's own value belongs to it; beside an event or a count a value is a second result.
  return forms;
}

const belonging: Record<ResultForm, readonly (keyof Measurement)[]> = {
  value: ["value", "sd", "sdDex", "plus", "minus", "noise"],
  limit: ["value", "sd", "sdDex", "confidence", "sigmas", "noise"],
  occurred: ["efficiency", "falseAlarm"],
  count: ["exposure", "background"],
};
const resultFields = [...new Set(Object.values(belonging).flat())];

function checkBelonging({ reading, measurement, pointer }: Place, form: ResultForm): void {
  for (const field of resultFields) {
    if (belonging[form].includes(field)) continue;
    const value = measurement[field];
    if (value === null || value === undefined) continue;
    const allowed = `with ${form}: ${belonging[form].join(", ")}`;
    reading.refuse(below(pointer, field), "not-applicable", `${field} beside ${form}`, allowed);
  }
}

function given(measurement: Legible<Measurement>, fields: (keyof Measurement)[]): string[] {
  return fields.filter((field) => measurement[field] !== null);
}

function checkValue({ reading, measurement, scale, pointer }: Place): void {
  const { setAside, noise } = measurement;
  const widths = given(measurement, ["sd", "sdDex", "plus", "minus"]);
  const asymmetric = widths.includes("plus") || widths.includes("minus");
  const symmetric = widths.includes("sd") || widths.includes("sdDex");
  checkNoise(reading, measurement, scale, pointer);
  if (asymmetric && noise === "linear") {
    const found = "plus and minus with linear noise";
    reading.refuse(below(pointer, "plus"), "not-applicable", found, "sd");
  }
  if (asymmetric && symmetric) {
    const allowed = "sd (or sdDex), or plus and minus";
    reading.refuse(pointer, "contradiction", widths.join(" and "), allowed);
  } else if (asymmetric) {
    for (const [field, other] of [
      ["plus", "minus"],
      ["minus", "plus"],
    ] as const) {
      if (measurement[field] !== null) continue;
      const found = `nothing, beside ${other}`;
      reading.refuse(below(pointer, field), "missing", found, "a number above 0");
    }
  } else if (widths.length === 0 && setAside === null) {
    const allowed = "a number above 0; or plus and minus; only one that is set aside needs none";
    reading.refuse(below(pointer, "sd"), "missing", "nothing", allowed);
  }
  checkDex(reading, measurement, scale, pointer);
}

/** `sdDex` is another writing of `sd` on log10, for noise that is in the logarithm. */
function checkDex(
  reading: Reading,
  measurement: Legible<Measurement>,
  scale: Scale | undefined,
  pointer: string,
): void {
  const { sd, sdDex, noise } = measurement;
  if (sdDex === null || sdDex === undefined) return;
  const at = below(pointer, "sdDex");
  if (scale !== undefined && scale !== "log10") {
    const found = `sdDex on the scale ${scale}`;
    reading.refuse(at, "not-applicable", found, "sd; sdDex is for the scale log10");
  } else if (noise === "linear") {
    reading.refuse(at, "not-applicable", "sdDex with linear noise", "sd");
  } else if (sd !== null) {
    reading.refuse(at, "contradiction", "sdDex beside sd", "one of the two");
  }
}

function checkNoise(
  reading: Reading,
  { noise }: Legible<Measurement>,
  scale: Scale | undefined,
  pointer: string,
): void {
  if (noise !== "linear" || scale === undefined || scale === "log10") return;
  const found = `linear noise on the scale ${scale}`;
  reading.refuse(below(pointer, "noise"), "not-applicable", found, "it on the scale log10 only");
}

function checkLimit(place: Place): void {
  const { reading, measurement, scale, pointer } = place;
  const { limit, value, setAside } = measurement;
  if (value === null) {
    reading.refuse(below(pointer, "value"), "missing", "nothing", "the limit's value");
  }
  checkNoise(reading, measurement, scale, pointer);
  checkDex(reading, measurement, scale, pointer);
  const how = given(measurement, ["confidence", "sigmas", "sd", "sdDex"]);
  const ways = new Set(how.map((field) => (field === "sdDex" ? "sd" : field)));
  if (ways.size > 1) {
    const allowed = "one of confidence, sigmas and sd";
    reading.refuse(pointer, "contradiction", how.join(" and "), allowed);
    return;
  }
  const [way] = ways;
  if (way === undefined && setAside === null) {
    const allowed = "a limit with one of confidence, sigmas and sd";
    reading.refuse(below(pointer, "limit"), "missing", "a limit without any of them", allowed);
  }
  if (limit === undefined || limit === null || scale === undefined || scale === "cyclic") return;
  const sides = scale === "magnitude" ? ["fainter", "brighter"] : ["upper", "lower"];
  if (!sides.includes(limit)) {
    const allowed = `${sides.join(" or ")} on the scale ${scale}`;
    reading.refuse(below(pointer, "limit"), "not-applicable", limit, allowed);
    return;
  }
  if (way === "confidence" || way === "sigmas") checkCompatible(place, how[0]!, limit);
  else if (way === "sd" && measurement.noise === "linear" && scale === "log10") {
    const found = "a limit with sd and linear noise";
    reading.refuse(below(pointer, "sd"), "not-applicable", found, "confidence or sigmas");
  }
}

/**
 * `confidence` and `sigmas` say that the quantity was compatible with zero: that is upper (or
 * fainter), where zero has a place.
 */
function checkCompatible(
  { reading, measurement, scale, pointer }: Place,
  way: string,
  limit: string,
): void {
  if (limit === "lower" || limit === "brighter") {
    const found = `${limit} with ${way}`;
    const allowed = `${limit} with sd; ${way} says that the quantity was compatible with zero`;
    reading.refuse(below(pointer, way), "not-applicable", found, allowed);
  } else if (scale === "log10" && measurement.noise === null) {
    const found = `${way} on the scale log10`;
    const allowed = 'sd or sdDex; or noise "linear", since zero has no logarithm';
    reading.refuse(below(pointer, way), "not-applicable", found, allowed);
  }
}

/** Signs and sizes of values, in the observable's unit. */
function checkSize(
  { reading, measurement, scale, pointer }: Place,
  target: Target | undefined,
): void {
  const { value, minus, noise, limit, confidence, sigmas } = measurement;
  if (typeof value !== "number") return;
  const { factor, offset } = toObservable(measurement, target);
  const inUnit = value * factor + offset;
  const compatible = confidence !== null || sigmas !== null;
  if (scale === "log10" && noise === null && inUnit <= 0) {
    const allowed = 'a number above 0 on the scale log10; or noise "linear" with sd';
    reading.refuse(below(pointer, "value"), "not-positive", String(value), allowed);
  } else if (limit === "upper" && compatible && scale !== undefined && inUnit <= 0) {
    const allowed = "a limit above 0: the quantity was compatible with zero";
    reading.refuse(below(pointer, "value"), "not-positive", String(value), allowed);
  }
  if (scale !== "log10" || typeof minus !== "number" || inUnit <= 0) return;
  if (minus * factor < inUnit) return;
  const allowed = `a number below the value ${inUnit / factor} on the scale log10`;
  reading.refuse(below(pointer, "minus"), "out-of-range", String(minus), allowed);
}

function toObservable(
  { unit }: Legible<Measurement>,
  target: Target | undefined,
): { factor: number; offset: number } {
  const to = target?.observable?.unit;
  if (typeof unit !== "string" || typeof to !== "string") return { factor: 1, offset: 0 };
  const found = conversion(unit, to);
  return found.kind === "factor" ? found : { factor: 1, offset: 0 };
}
