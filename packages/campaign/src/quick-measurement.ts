import type { Measurement } from "./document";
import type { MeasurementContent } from "./entries";
import { ID_PATTERN, KEY_PATTERN, LINE_LENGTH, NAME_PATTERN, UNIT_LENGTH } from "./fields";
import { isTime } from "./instants";
import { limits, measurementFields, SOURCE_LENGTH, withResultDefaults } from "./measurement";

/**
 * The measurement schemas once more, by hand and without words, for lists of hundreds of
 * thousands. No generated code, so that it also runs where a page's policy forbids `eval`.
 *
 * Either the measurement exactly as its schema reads it, or null: then the schema decides, and
 * has the words. A property test holds the two against each other.
 */
export function quickMeasurement(value: unknown): Measurement | null {
  const raw = objectOf(value, documentFields);
  if (raw === null || !timeOrAbsent(raw["postedAt"])) return null;
  const fields = quickFields(raw);
  if (fields === null) return null;
  fields.postedAt = (raw["postedAt"] as string | undefined) ?? null;
  return fields;
}

/** The same for a measurement of a ledger's payload. */
export function quickContent(value: unknown): MeasurementContent | null {
  const raw = objectOf(value, contentFields);
  // Claimed dates come with imports only; the schema reads them.
  if (raw === null || (raw["claimed"] ?? null) !== null) return null;
  const fields = quickFields(raw);
  if (fields === null) return null;
  const { postedAt: _, ...content } = fields;
  return { ...content, claimed: null };
}

const documentFields = new Set([...Object.keys(measurementFields), "postedAt"]);
const contentFields = new Set([...Object.keys(measurementFields), "claimed"]);
const limitWords = new Set<unknown>(limits);

function quickFields(raw: Raw): Measurement | null {
  if (
    !fits(raw["id"], ID_PATTERN) ||
    !fits(raw["measurand"], KEY_PATTERN) ||
    !fitsOrAbsent(raw["facility"], KEY_PATTERN) ||
    !fitsOrAbsent(raw["team"], KEY_PATTERN) ||
    !textOrAbsent(raw["batch"], LINE_LENGTH) ||
    !timeOrAbsent(raw["observedAt"]) ||
    !timeOrAbsent(raw["knownSince"]) ||
    !numberOrAbsent(raw["value"]) ||
    !positiveOrAbsent(raw["sd"]) ||
    !positiveOrAbsent(raw["sdDex"]) ||
    !positiveOrAbsent(raw["plus"]) ||
    !positiveOrAbsent(raw["minus"]) ||
    !textOrAbsent(raw["unit"], UNIT_LENGTH) ||
    !textOrAbsent(raw["source"], SOURCE_LENGTH) ||
    !textOrAbsent(raw["sameData"], LINE_LENGTH) ||
    !rareFieldsFit(raw)
  ) {
    return null;
  }
  const conditions = conditionsOf(raw["conditions"]);
  const extra = extraOf(raw["extra"]);
  const shared = sharedOf(raw["shared"]);
  const setAside = setAsideOf(raw["setAside"]);
  if (conditions === null || extra === null || shared === null || setAside === undefined) {
    return null;
  }
  const given = raw as Partial<Measurement>;
  return withResultDefaults({
    id: given.id!,
    measurand: given.measurand!,
    facility: given.facility ?? null,
    team: given.team ?? null,
    batch: given.batch ?? null,
    observedAt: given.observedAt ?? null,
    postedAt: null,
    knownSince: given.knownSince ?? null,
    conditions,
    value: given.value ?? null,
    sd: given.sd ?? null,
    sdDex: given.sdDex ?? null,
    plus: given.plus ?? null,
    minus: given.minus ?? null,
    limit: given.limit ?? null,
    confidence: given.confidence ?? null,
    sigmas: given.sigmas ?? null,
    noise: given.noise ?? null,
    occurred: given.occurred ?? null,
    efficiency: given.efficiency ?? null,
    falseAlarm: given.falseAlarm ?? null,
    count: given.count ?? null,
    exposure: given.exposure ?? null,
    background: given.background ?? null,
    unit: given.unit ?? null,
    status: given.status ?? "final",
    source: given.source ?? null,
    extra,
    shared,
    sameData: given.sameData ?? null,
    setAside,
  });
}

/** Limits, events, counts: seldom there, so that one look usually passes them. */
function rareFieldsFit(raw: Raw): boolean {
  const { status, noise, limit, occurred, count } = raw;
  return (
    (absent(status) || status === "final" || status === "provisional") &&
    (absent(noise) || noise === "linear") &&
    (absent(limit) || limitWords.has(limit)) &&
    (absent(occurred) || typeof occurred === "boolean") &&
    (absent(count) || (Number.isSafeInteger(count) && (count as number) >= 0)) &&
    between(raw["confidence"], (c) => c > 0.5 && c < 1) &&
    positiveOrAbsent(raw["sigmas"]) &&
    between(raw["efficiency"], (p) => p >= 0 && p <= 1) &&
    between(raw["falseAlarm"], (p) => p >= 0 && p <= 1) &&
    positiveOrAbsent(raw["exposure"]) &&
    between(raw["background"], (b) => b >= 0 && b < Infinity)
  );
}

type Raw = Record<string, unknown>;

/** An object of known members alone (inherited ones send it to the schema, which knows better). */
function objectOf(value: unknown, known: ReadonlySet<string>): Raw | null {
  if (typeof value !== "object" || value === null || Array.isArray(value)) return null;
  for (const member in value) if (!known.has(member)) return null;
  return value as Raw;
}

function absent(value: unknown): boolean {
  return value === undefined || value === null;
}

function fits(value: unknown, pattern: RegExp): boolean {
  return typeof value === "string" && pattern.test(value);
}

function fitsOrAbsent(value: unknown, pattern: RegExp): boolean {
  return absent(value) || fits(value, pattern);
}

function timeOrAbsent(value: unknown): boolean {
  return absent(value) || (typeof value === "string" && isTime(value));
}

function textOrAbsent(value: unknown, most: number): boolean {
  return absent(value) || (typeof value === "string" && value.length > 0 && value.length <= most);
}

function numberOrAbsent(value: unknown): boolean {
  return absent(value) || Number.isFinite(value);
}

function positiveOrAbsent(value: unknown): boolean {
  return absent(value) || (Number.isFinite(value) && (value as number) > 0);
}

function between(value: unknown, holds: (value: number) => boolean): boolean {
  return absent(value) || (typeof value === "number" && holds(value));
}

function conditionsOf(value: unknown): Record<string, number> | null {
  if (absent(value)) return {};
  if (typeof value !== "object" || Array.isArray(value)) return null;
  const conditions: Record<string, number> = {};
  for (const name in value as Raw) {
    const number = (value as Raw)[name];
    if (!NAME_PATTERN.test(name) || !Number.isFinite(number)) return null;
    conditions[name] = number as number;
  }
  return conditions;
}

/** Bookkeeping that only the schema reads: null unless it is empty. */
function extraOf(value: unknown): Measurement["extra"] | null {
  if (absent(value)) return {};
  return typeof value === "object" && !Array.isArray(value) && Object.keys(value!).length === 0
    ? {}
    : null;
}

const loadingFields = new Set(["error", "coefficient"]);

function sharedOf(value: unknown): Measurement["shared"] | null {
  if (absent(value)) return [];
  if (!Array.isArray(value)) return null;
  const shared: Measurement["shared"] = [];
  for (const one of value) {
    const raw = objectOf(one, loadingFields);
    if (raw === null || !fits(raw["error"], KEY_PATTERN) || !numberOrAbsent(raw["coefficient"])) {
      return null;
    }
    shared.push({
      error: raw["error"] as string,
      coefficient: (raw["coefficient"] as number | undefined) ?? 1,
    });
  }
  return shared;
}

const setAsideFields = new Set(["reason"]);

/** Undefined where it isn't what the schema takes. */
function setAsideOf(value: unknown): Measurement["setAside"] | undefined {
  if (absent(value)) return null;
  const raw = objectOf(value, setAsideFields);
  const reason = raw?.["reason"];
  if (typeof reason !== "string" || reason === "" || reason.length > LINE_LENGTH) return undefined;
  return { reason };
}
