import type {
  Measurand,
  Measurement,
  Observable,
  Prediction,
  Reference,
} from "@weighhouse/campaign/document";
import { unitText } from "@/look/unit-text";
import { formatInterval, formatMeasured, formatNumber } from "@weighhouse/figures/numbers";

/** A no-model range (reference) in words: `anything from −1 to 4 arcsec alike`. */
export function referenceInWords(reference: Reference | null, observable: Observable): string {
  const unit = unitOf(observable);
  if (reference === null) {
    return observable.scale === "event" ? "even odds" : "any direction alike";
  }
  const scatter = reference.scatter > 0 ? `, scatter ${formatNumber(reference.scatter)}` : "";
  return rangeInWords(reference, observable, unit) + scatter;
}

function rangeInWords(reference: Reference, observable: Observable, unit: string): string {
  const spread = observable.scale === "log10" ? "\u00a0dex" : unit;
  switch (reference.family) {
    case "uniform":
      return `${formatInterval(reference.lower, reference.upper)}${unit}, all alike${observable.scale === "log10" ? " in log₁₀" : ""}`;
    case "normal":
      return `normal about ${formatNumber(reference.mean)}${unit}, sd ${formatNumber(reference.sd)}${spread}`;
    case "polynomial":
      return `polynomial of degree ${reference.degree} in ${reference.in} about ${formatNumber(reference.centre)}${unit}, sd ${formatNumber(reference.sd)}${spread}`;
    case "gamma":
      return `gamma about ${formatNumber(reference.mean)}${unit}, sd ${formatNumber(reference.sd)}${unit}`;
  }
}

/** What is predicted, with its theory error (tolerance): `1.75 ± 0.10 arcsec`. */
export function predictionInWords(prediction: Prediction, observable: Observable): string {
  const { expected, tolerance, probability } = prediction;
  const unit = unitOf(observable);
  if (probability !== null) return `probability ${formatNumber(probability)}`;
  const value = typeof expected === "number" ? formatNumber(expected) : expected;
  if (tolerance === null) return value === null ? "nothing" : `exactly ${value}${unit}`;
  switch (tolerance.family) {
    case "normal": {
      if (tolerance.relative) {
        return `${value}${unit} ± ${formatNumber(tolerance.sd * 100)}\u00a0% (sd)`;
      }
      const spread = observable.scale === "log10" ? "\u00a0dex" : unit;
      return `${value}${observable.scale === "log10" ? unit : ""} ± ${formatNumber(tolerance.sd)}${spread} (sd)`;
    }
    case "interval":
      return `${formatInterval(tolerance.lower, tolerance.upper)}${unit}`;
    case "atMost":
      return `at most ${formatNumber(tolerance.bound)}${unit}`;
    case "atLeast":
      return `at least ${formatNumber(tolerance.bound)}${unit}`;
    case "splitNormal":
      return `${value} +${formatNumber(tolerance.plus)} −${formatNumber(tolerance.minus)}${unit}`;
    case "gamma":
      return `gamma about ${formatNumber(tolerance.mean)}${unit}, sd ${formatNumber(tolerance.sd)}`;
  }
}

/** A measurement's result as it was posted, with the unit that it was posted in. */
export function resultInWords(measurement: Measurement, observable: Observable): string {
  const posted = measurement.unit ?? observable.unit;
  const unit = posted === null ? null : unitText(posted);
  const { value } = measurement;
  if (measurement.occurred !== null) return measurement.occurred ? "occurred" : "did not occur";
  if (measurement.count !== null) return `${measurement.count} counted`;
  if (value === null) return "no value";
  if (measurement.limit !== null) {
    return `${limitSigns[measurement.limit]} ${formatMeasured(value, measurement.sd, { scale: "linear", unit })}${limitConfidence(measurement)}`;
  }
  if (measurement.plus !== null && measurement.minus !== null) {
    return `${formatNumber(value)} +${formatNumber(measurement.plus)} −${formatNumber(measurement.minus)}${unitOf({ unit })}`;
  }
  const dex = measurement.sdDex !== null;
  return formatMeasured(value, measurement.sdDex ?? measurement.sd, {
    scale: dex ? "log10" : "linear",
    unit,
  });
}

const limitSigns = { upper: "<", lower: ">", fainter: "fainter than", brighter: "brighter than" };

function limitConfidence({ confidence, sigmas }: Measurement): string {
  if (confidence !== null) return ` (${formatNumber(confidence * 100)}\u00a0%)`;
  return sigmas === null ? "" : ` (${formatNumber(sigmas)} σ)`;
}

export function unitOf({ unit }: { unit: string | null }): string {
  return unit === null || unit === "1" ? "" : `\u00a0${unitText(unit)}`;
}

/** Where the conditions lie that a quantity is declared for: `depth 2 to 40 m`. */
export function conditionsInWords(measurand: Measurand, observable: Observable): string[] {
  return Object.entries(measurand.where).map(([key, [from, to]]) => {
    const condition = observable.conditions.find((each) => each.key === key);
    return `${condition?.title ?? key} ${formatInterval(from, to)}${unitOf({ unit: condition?.unit ?? null })}`;
  });
}
