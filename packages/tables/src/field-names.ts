import { measurementFields } from "@weighhouse/campaign/measurement";

/** Columns that hold no field of their own by name, as tables of measurements call them (common practice). */
const SYNONYMS: Record<string, readonly string[]> = {
  id: ["identifier", "measurementid", "obsid"],
  measurand: ["quantity"],
  observable: [],
  facility: ["instrument", "observatory", "site", "station", "telescope"],
  batch: ["night", "run"],
  value: ["measured", "measurement", "reading", "result", "val"],
  sd: [
    "err",
    "error",
    "sigma",
    "standarddeviation",
    "standarduncertainty",
    "std",
    "stddev",
    "stdev",
    "unc",
    "uncertainty",
    "σ",
  ],
  confidence: ["conf", "confidencelevel"],
  sigmas: ["nsigma", "nsigmas"],
  count: ["counts"],
  occurred: ["detected", "seen"],
  unit: ["units"],
  source: ["bibcode", "doi", "ref", "reference", "url"],
  sameData: ["samedataas"],
  setAside: ["excludedbecause", "setasidebecause", "setasidereason"],
};

/** Times by name alone; formats and scales are read by their words. */
const TIME_NAMES = new Set([
  "datetime",
  "obsdate",
  "obstime",
  "observed",
  "timestamp",
  "date",
  "time",
]);
/** Names of times that are UTC by the FITS standard (4.0, section 9), unless a file says otherwise. */
const FITS_TIMES = new Set(["dateobs", "dateavg"]);

/** Fields that only observables of one scale have. */
export const FIELDS_OF_SCALE: Record<string, "count" | "event"> = {
  count: "count",
  exposure: "count",
  background: "count",
  occurred: "event",
  efficiency: "event",
  falseAlarm: "event",
};

/** Fields of one result: each measurand's own where a table has several side by side. */
export const RESULT_FIELDS = [
  "value",
  "sd",
  "sdDex",
  "plus",
  "minus",
  "limit",
  "upperLimit",
  "lowerLimit",
  "confidence",
  "sigmas",
  "noise",
  "occurred",
  "efficiency",
  "falseAlarm",
  "count",
  "exposure",
  "background",
  "unit",
  "status",
  "source",
  "setAside",
] as const;

const OWN_FIELDS = Object.keys(measurementFields).filter(
  (field) => field !== "conditions" && field !== "extra",
);

/** Whatever a column may fill that isn't a condition's or one measurand's own. */
export const PLAIN_FIELDS = new Set([
  ...OWN_FIELDS,
  "upperLimit",
  "lowerLimit",
  "observable",
  "date",
  "timeOfDay",
  "extra",
  "ignore",
]);

const BY_NAME = new Map([...OWN_FIELDS, "observable"].map((field) => [plainName(field), field]));
const BY_SYNONYM = new Map(
  Object.entries(SYNONYMS).flatMap(([field, names]) => names.map((name) => [name, field])),
);

/** Upper and lower case, spaces, underscores, hyphens and dots make no difference; a sign at an end does. */
export function plainName(name: string): string {
  return signsInWords(name)
    .toLowerCase()
    .replaceAll(/[\s_.-]/g, "");
}

/** `+err`, `err-`: a sign at an end of a name is a word. */
export function signsInWords(name: string): string {
  return name
    .replace(/^\+\s*(?=.)/, "plus_")
    .replace(/^[-\u2212–]\s*(?=.)/, "minus_")
    .replace(/(?<=.)\s*\+$/, "_plus")
    .replace(/(?<=.)\s*[-\u2212–]$/, "_minus");
}

/** A field by a column's name, times apart. */
export function fieldOfName(name: string): { field: string; why: "name" | "synonym" } | null {
  const plain = plainName(name);
  const own = BY_NAME.get(plain);
  if (own !== undefined) return { field: own, why: "name" };
  const other = BY_SYNONYM.get(plain);
  return other === undefined ? null : { field: other, why: "synonym" };
}

export function isTimeName(name: string): boolean {
  return TIME_NAMES.has(plainName(name)) || isFitsTime(name);
}

export function isFitsTime(name: string): boolean {
  return FITS_TIMES.has(plainName(name));
}
