import type { Measurement } from "./document";
import { readForm } from "./form";
import type { Legible } from "./form";
import { parseJson } from "./json-text";
import { measurementSchema } from "./measurement";
import { MeasurementText } from "./measurement-text";
import { below } from "./pointer";
import type { Problem } from "./problem";
import { quickMeasurement } from "./quick-measurement";
import type { TextCursor } from "./text-cursor";

const COMMA = 44;
const COLON = 58;
const OPEN_LIST = 91;
const CLOSE_LIST = 93;
const OPEN = 123;

/** A document's text in two: its measurements, read, and the value of the rest without them. */
export type DividedText = {
  rest: unknown;
  measurements: (Legible<Measurement> | undefined)[];
  /** What is wrong with the form of measurements. */
  problems: Problem[];
};

/**
 * Reads the measurements out of a document's text one by one, so that a long list is never there
 * twice, as JSON.parse gave it and as it is read.
 *
 * @returns null for whatever isn't JSON, has a member twice or has no list of measurements:
 *   then the whole text must be parsed, for its value or its errors
 */
export function divideText(text: string): DividedText | null {
  const reader = new MeasurementText(text);
  const start = startOfMeasurements(reader.cursor);
  if (start === null) return null;
  const list = readList(reader);
  if (list === null) return null;
  const end = reader.cursor.at;
  const rest = parseJson(`${text.slice(0, start)}[]${text.slice(end)}`);
  return rest.problems.length > 0 ? null : { rest: rest.value, ...list };
}

/** Leaves the cursor at the list that is the document's member `measurements`. */
function startOfMeasurements(cursor: TextCursor): number | null {
  if (cursor.text.startsWith("\uFEFF")) cursor.at = 1;
  if (!cursor.take(OPEN)) return null;
  do {
    const name = cursor.plain(64);
    if (name === null || !cursor.take(COLON)) return null;
    if (name === "measurements") return cursor.code() === OPEN_LIST ? cursor.at : null;
    if (!cursor.pass()) return null;
  } while (cursor.take(COMMA));
  return null;
}

function readList(reader: MeasurementText): Omit<DividedText, "rest"> | null {
  const { cursor } = reader;
  const list: Omit<DividedText, "rest"> = { measurements: [], problems: [] };
  cursor.at += 1;
  cursor.space();
  if (cursor.code() === CLOSE_LIST) {
    cursor.at += 1;
    return list;
  }
  do {
    const start = cursor.at;
    let one: Legible<Measurement> | undefined | null = reader.next();
    if (one === null) {
      cursor.at = start;
      one = readOdd(cursor, list);
      if (one === null) return null;
    }
    list.measurements.push(one);
  } while (cursor.take(COMMA));
  if (cursor.code() !== CLOSE_LIST) return null;
  cursor.at += 1;
  return list;
}

/** One that isn't plain: by way of JSON.parse. Null where it isn't JSON or has a member twice. */
function readOdd(
  cursor: TextCursor,
  { measurements, problems }: Omit<DividedText, "rest">,
): Legible<Measurement> | undefined | null {
  const start = cursor.at;
  if (!cursor.pass()) return null;
  const parsed = parseJson(cursor.text.slice(start, cursor.at));
  if (parsed.problems.length > 0) return null;
  const quick = quickMeasurement(parsed.value);
  if (quick !== null) return quick;
  const pointer = below("/measurements", measurements.length);
  const form = readForm(measurementSchema, parsed.value, pointer);
  for (const problem of form.problems) problems.push(problem);
  return form.value;
}
