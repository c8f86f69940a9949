import type { CampaignDocument, Measurand, Scale } from "@weighhouse/campaign/document";
import { unitText } from "@/look/unit-text";
import { formatInterval, formatNumber, roundToUncertainty } from "@weighhouse/figures/numbers";

/** A measurand with what its observable says of it, as the forms show it. */
export interface Quantity {
  measurand: Measurand;
  unit: string | null;
  scale: Scale;
}

export function quantitiesOf(document: CampaignDocument): Map<string, Quantity> {
  const observables = new Map(document.observables.map((each) => [each.key, each]));
  return new Map(
    document.measurands.flatMap((measurand) => {
      const observable = observables.get(measurand.observable);
      return observable === undefined
        ? []
        : [[measurand.key, { measurand, unit: observable.unit, scale: observable.scale }]];
    }),
  );
}

/** " arcsec" to stand after a number; nothing for a plain number. */
export function unitAfter(quantity: Quantity): string {
  return quantity.unit === null || quantity.unit === "1" ? "" : ` ${unitText(quantity.unit)}`;
}

/** The unit of an uncertainty: the observable's, or dex where the scale is logarithmic. */
export function spreadUnit(quantity: Quantity): string {
  if (quantity.scale === "log10") return "dex";
  return quantity.unit === null || quantity.unit === "1" ? "" : unitText(quantity.unit);
}

/** The no-model range in words: "−1 to 4 arcsec, all alike". */
export function referenceWords(quantity: Quantity): string {
  const { reference } = quantity.measurand;
  if (reference === null) return "none declared";
  if (reference.family === "uniform") {
    const alike = quantity.scale === "log10" ? "all factors alike" : "all values alike";
    return `${formatInterval(reference.lower, reference.upper)}${unitAfter(quantity)}, ${alike}`;
  }
  if (reference.family === "normal") {
    const spread = quantity.scale === "log10" ? " dex" : "";
    return `about ${formatNumber(reference.mean)}${unitAfter(quantity)}, normal with standard deviation ${formatNumber(reference.sd)}${spread}`;
  }
  return reference.family;
}

/** A value that would be read: to the decimals that its supposed uncertainty leaves certain. */
export function formatReading(value: number, sd: number | null, quantity: Quantity): string {
  if (sd === null) return formatNumber(value, 4);
  const spread = quantity.scale === "log10" ? Math.abs(value) * Math.LN10 * sd : sd;
  const rounded = roundToUncertainty(value, spread);
  return rounded.exponent === 0 ? rounded.value : formatNumber(value, 3);
}

/** What the no-model range expects at its middle, in the observable's unit. */
export function referenceMiddle(quantity: Quantity): number | null {
  const { reference } = quantity.measurand;
  if (reference?.family === "normal") return reference.mean;
  if (reference?.family !== "uniform") return null;
  return quantity.scale === "log10"
    ? Math.sqrt(reference.lower * reference.upper)
    : (reference.lower + reference.upper) / 2;
}

/**
 * The uncertainty that a preview supposes where the person has named none, in the observable's
 * unit (dex on log10): the median of those already posted, else a fiftieth of the no-model range
 * (a tenth of a normal one's sd), which tells most predictions apart.
 */
export function supposedSd(document: CampaignDocument, quantity: Quantity): number | null {
  const posted = document.measurements
    .filter((each) => each.measurand === quantity.measurand.key && each.setAside === null)
    .flatMap((each) => spreadOf(each, quantity) ?? [])
    .toSorted((a, b) => a - b);
  const median = posted[Math.floor(posted.length / 2)];
  if (median !== undefined) return round(median);
  const { reference } = quantity.measurand;
  if (reference?.family === "normal") return round(reference.sd / 10);
  if (reference?.family !== "uniform") return null;
  const width =
    quantity.scale === "log10"
      ? Math.log10(reference.upper / reference.lower)
      : reference.upper - reference.lower;
  return round(width / 50);
}

function spreadOf(
  measurement: CampaignDocument["measurements"][number],
  quantity: Quantity,
): number | null {
  const { value, sd, sdDex, unit } = measurement;
  if (unit !== null && unit !== quantity.unit) return null;
  if (quantity.scale !== "log10") return sd;
  if (sdDex !== null) return sdDex;
  return sd !== null && value !== null && value > 0 ? sd / (value * Math.LN10) : null;
}

function round(value: number): number {
  return Number(value.toPrecision(2));
}
