import type { Limit, Measurement } from "./document";
import { LINE_LENGTH, UNIT_LENGTH } from "./fields";
import { limits, SOURCE_LENGTH, withResultDefaults } from "./measurement";
import { ID_LETTER, KEY_LETTER, NAME_LETTER, TextCursor } from "./text-cursor";

const COMMA = 44;
const COLON = 58;
const OPEN_LIST = 91;
const CLOSE_LIST = 93;
const LETTER_N = 110;
const OPEN = 123;
const CLOSE = 125;

const KEY_LENGTH = 64;
const ID_LENGTH = 200;
const NAME_LENGTH = 32;

/** What a measurement has that has none of its own; frozen, since thousands have the same. */
const NOTHING = Object.freeze({});
const NO_SHARED = Object.freeze([]) as unknown as Measurement["shared"];
const SHARED_KEPT = 4096;

/**
 * Reads measurements straight out of a JSON text. Of hundreds of thousands nearly every one is
 * plain: known members, each once, strings without escapes, everything in range. Those are made
 * here, without the object that JSON.parse would make first. Whatever else comes is null, and left
 * for JSON.parse and the schema, which have the words; a property test holds the two together.
 */
export class MeasurementText {
  readonly cursor = new TextCursor();
  readonly #shared = new Map<string, Measurement["shared"]>();
  /** The members of the measurement before, in their order: the next one's are mostly the same. */
  readonly #order: number[] = [];
  /** The measurement before: this one's strings are often the same. */
  before = blank();

  /** The measurement at the cursor, or null, with the cursor anywhere. */
  next(): Measurement | null {
    const { cursor } = this;
    if (!cursor.take(OPEN)) return null;
    const one = blank();
    let seen = 0;
    let place = 0;
    do {
      const field = this.#field(place);
      if (field < 0 || (seen & (1 << field)) !== 0 || !cursor.take(COLON)) return null;
      seen |= 1 << field;
      this.#order[place] = field;
      place += 1;
      if (cursor.code() === LETTER_N) {
        if (isRequired(field) || !cursor.word("null")) return null;
      } else if (!readers[field]!(one, this)) {
        return null;
      }
    } while (cursor.take(COMMA));
    if (!cursor.take(CLOSE) || (seen & REQUIRED) !== REQUIRED) return null;
    this.before = one;
    return withResultDefaults(one);
  }

  #field(place: number): number {
    const { cursor } = this;
    const expected = this.#order[place];
    if (expected !== undefined && cursor.word(quotedNames[expected]!)) return expected;
    const name = cursor.plain(NAME_LENGTH);
    return name === null ? -1 : (fieldOf.get(name) ?? -1);
  }

  /** Loadings; equal ones, of which a long list has few, are one list. */
  shared(): Measurement["shared"] | null {
    const { cursor } = this;
    const start = cursor.at;
    const end = cursor.text.indexOf("]", start) + 1;
    const written = cursor.text.slice(start, end);
    const known = this.#shared.get(written);
    if (known !== undefined) {
      cursor.at = end;
      return known;
    }
    const read = loadings(cursor);
    if (read === null) return null;
    const shared = read.length === 0 ? NO_SHARED : (Object.freeze(read) as typeof read);
    for (const loading of shared) Object.freeze(loading);
    if (cursor.at === end && this.#shared.size < SHARED_KEPT) this.#shared.set(written, shared);
    return shared;
  }
}

function loadings(cursor: TextCursor): Measurement["shared"] | null {
  const shared: Measurement["shared"] = [];
  if (!cursor.take(OPEN_LIST)) return null;
  if (cursor.code() === CLOSE_LIST) {
    cursor.at += 1;
    return shared;
  }
  do {
    const loading = loadingAt(cursor);
    if (loading === null) return null;
    shared.push(loading);
  } while (cursor.take(COMMA));
  if (cursor.code() !== CLOSE_LIST) return null;
  cursor.at += 1;
  return shared;
}

/** `error`, and after it perhaps `coefficient`: any other order is left for JSON.parse. */
function loadingAt(cursor: TextCursor): Measurement["shared"][number] | null {
  if (!cursor.take(OPEN) || !cursor.word('"error"') || !cursor.take(COLON)) return null;
  const error = cursor.lettered(KEY_LETTER, KEY_LENGTH);
  if (error === null || error.startsWith("-")) return null;
  let coefficient = 1;
  if (cursor.take(COMMA)) {
    if (!cursor.word('"coefficient"') || !cursor.take(COLON)) return null;
    coefficient = cursor.number();
  }
  return Number.isNaN(coefficient) || !cursor.take(CLOSE) ? null : { error, coefficient };
}

/** Names and numbers; null also for a name that stands twice. */
function conditionsAt(cursor: TextCursor): Record<string, number> | null {
  if (!cursor.take(OPEN)) return null;
  if (cursor.code() === CLOSE) {
    cursor.at += 1;
    return NOTHING;
  }
  const conditions: Record<string, number> = {};
  do {
    const name = cursor.lettered(NAME_LETTER, NAME_LENGTH);
    if (name === null || !(name >= "a" && name < "{") || name in conditions) return null;
    if (!cursor.take(COLON)) return null;
    const value = cursor.number();
    if (Number.isNaN(value)) return null;
    conditions[name] = value;
  } while (cursor.take(COMMA));
  if (cursor.code() !== CLOSE) return null;
  cursor.at += 1;
  return conditions;
}

type Reader = (one: Measurement, text: MeasurementText) => boolean;

/** How each member is read, in the schema's order; false where it isn't plain or isn't in range. */
const readersByName: { [K in keyof Measurement]: Reader } = {
  id: (one, { cursor }) => is((one.id = cursor.lettered(ID_LETTER, ID_LENGTH)!)),
  measurand: (one, text) => isKey((one.measurand = key(text, text.before.measurand)!)),
  facility: (one, text) => isKey((one.facility = key(text, text.before.facility))),
  team: (one, text) => isKey((one.team = key(text, text.before.team))),
  batch: (one, text) => is((one.batch = plain(text, text.before.batch, LINE_LENGTH))),
  observedAt: (one, text) => is((one.observedAt = time(text, text.before.observedAt))),
  postedAt: (one, text) => is((one.postedAt = time(text, text.before.postedAt))),
  knownSince: (one, text) => is((one.knownSince = time(text, text.before.knownSince))),
  conditions: (one, { cursor }) => is((one.conditions = conditionsAt(cursor)!)),
  value: (one, { cursor }) => !Number.isNaN((one.value = cursor.number())),
  sd: (one, { cursor }) => (one.sd = cursor.number()) > 0,
  sdDex: (one, { cursor }) => (one.sdDex = cursor.number()) > 0,
  plus: (one, { cursor }) => (one.plus = cursor.number()) > 0,
  minus: (one, { cursor }) => (one.minus = cursor.number()) > 0,
  limit: (one, { cursor }) =>
    limits.includes((one.limit = cursor.plain(NAME_LENGTH) as Limit | null)!),
  confidence: (one, { cursor }) => (one.confidence = cursor.number()) > 0.5 && one.confidence < 1,
  sigmas: (one, { cursor }) => (one.sigmas = cursor.number()) > 0,
  noise: (one, { cursor }) => cursor.word('"linear"') && is((one.noise = "linear")),
  occurred: (one, { cursor }) => {
    one.occurred = cursor.word("true") ? true : cursor.word("false") ? false : null;
    return one.occurred !== null;
  },
  efficiency: (one, { cursor }) => isProbability((one.efficiency = cursor.number())),
  falseAlarm: (one, { cursor }) => isProbability((one.falseAlarm = cursor.number())),
  count: (one, { cursor }) => {
    one.count = cursor.number();
    return Number.isSafeInteger(one.count) && one.count >= 0;
  },
  exposure: (one, { cursor }) => (one.exposure = cursor.number()) > 0,
  background: (one, { cursor }) => (one.background = cursor.number()) >= 0,
  unit: (one, text) => is((one.unit = plain(text, text.before.unit, UNIT_LENGTH))),
  status: (one, { cursor }) => {
    if (cursor.word('"final"')) return true;
    one.status = "provisional";
    return cursor.word('"provisional"');
  },
  source: (one, text) => is((one.source = plain(text, text.before.source, SOURCE_LENGTH))),
  extra: (_one, { cursor }) => cursor.word("{}"),
  shared: (one, text) => is((one.shared = text.shared()!)),
  sameData: (one, { cursor }) => is((one.sameData = cursor.plain(LINE_LENGTH))),
  // Seldom there; the schema reads it.
  setAside: () => false,
};

const names = Object.keys(readersByName);
const readers = Object.values(readersByName);
const quotedNames = names.map((name) => `"${name}"`);
const fieldOf = new Map(names.map((name, field) => [name, field]));
const REQUIRED = (1 << fieldOf.get("id")!) | (1 << fieldOf.get("measurand")!);

function isRequired(field: number): boolean {
  return ((1 << field) & REQUIRED) !== 0;
}

function key({ cursor }: MeasurementText, before: string | null): string | null {
  return cursor.same(before) ? before : cursor.lettered(KEY_LETTER, KEY_LENGTH);
}

function plain({ cursor }: MeasurementText, before: string | null, most: number): string | null {
  return cursor.same(before) ? before : cursor.plain(most);
}

function time({ cursor }: MeasurementText, before: string | null): string | null {
  return cursor.same(before) ? before : cursor.time();
}

function is(value: unknown): boolean {
  return value !== null;
}

function isKey(value: string | null): boolean {
  return value !== null && value.charCodeAt(0) !== 45;
}

function isProbability(value: number): boolean {
  return value >= 0 && value <= 1;
}

function blank(): Measurement {
  return {
    id: "",
    measurand: "",
    facility: null,
    team: null,
    batch: null,
    observedAt: null,
    postedAt: null,
    knownSince: null,
    conditions: NOTHING,
    value: null,
    sd: null,
    sdDex: null,
    plus: null,
    minus: null,
    limit: null,
    confidence: null,
    sigmas: null,
    noise: null,
    occurred: null,
    efficiency: null,
    falseAlarm: null,
    count: null,
    exposure: null,
    background: null,
    unit: null,
    status: "final",
    source: null,
    extra: NOTHING,
    shared: NO_SHARED,
    sameData: null,
    setAside: null,
  };
}
