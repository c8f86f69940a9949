import type { Measurement } from "./document";
import { readForm } from "./form";
import type { Legible } from "./form";
import { parseJson } from "./json-text";
import { measurementSchema } from "./measurement";
import { MeasurementText } from "./measurement-text";
import { below } from "./pointer";
import type { Problem } from "./problem";
import { quickMeasurement } from "./quick-measurement";

const COMMA = 44;
const COLON = 58;
const OPEN_LIST = 91;
const CLOSE_LIST = 93;
const OPEN = 123;

/** No measurement is longer: what seems to be is no JSON, and left to who has the words for that. */
const LONGEST = 1_000_000;
/** Letters that hold the rest of nearly every measurement. */
const NEARLY_ALL = 4096;

/** A document's text in two: its measurements, read, and the value of the rest without them. */
export type DividedText = {
  rest: unknown;
  measurements: (Legible<Measurement> | undefined)[];
  /** What is wrong with the form of measurements. */
  problems: Problem[];
};

/** The same of a whole text at once. */
export function divideText(text: string): DividedText | null {
  const document = new DocumentText();
  document.push(text);
  return document.end();
}

/**
 * Reads a document's text, which may come in pieces, and its measurements one by one: a long list
 * is never there twice, as text or as JSON.parse gives it, and as it is read.
 */
export class DocumentText {
  #stage: "before the list" | "in the list" | "behind the list" | "not plain" = "before the list";
  #expected: "first" | "one" | "comma" = "first";
  #before = "";
  #triedAt = 0;
  /** A measurement of which the end has yet to come. */
  #begun = "";
  #behind: string[] = [];
  readonly #reader = new MeasurementText();
  readonly #measurements: DividedText["measurements"] = [];
  readonly #problems: Problem[] = [];

  push(text: string): void {
    if (this.#stage === "behind the list") this.#behind.push(text);
    else if (this.#stage === "in the list") this.#readOn(text);
    else if (this.#stage === "before the list") {
      this.#before += text;
      // Looked through again when it is twice as long, lest a long beginning be read again and again.
      if (this.#before.length >= 2 * this.#triedAt) this.#findList();
    }
  }

  /**
   * @returns null for whatever isn't JSON, has a member twice or has no list of measurements:
   *   then the whole text must be parsed at once, for its value or its errors
   */
  end(): DividedText | null {
    if (this.#stage === "before the list" && this.#before.length > this.#triedAt) this.#findList();
    if (this.#stage === "in the list") {
      const { cursor } = this.#reader;
      cursor.turnTo(this.#begun);
      this.#readList(cursor.limit);
      this.#keepRest();
    }
    if (this.#stage !== "behind the list") return null;
    const rest = parseJson(`${this.#before}[]${this.#behind.join("")}`);
    if (rest.problems.length > 0) return null;
    return { rest: rest.value, measurements: this.#measurements, problems: this.#problems };
  }

  #findList(): void {
    const text = this.#before;
    this.#triedAt = text.length;
    const start = this.#startOfList(text);
    if (start === null) return;
    this.#before = text.slice(0, start);
    this.#stage = "in the list";
    this.#reader.cursor.at = start + 1;
    this.#readList(text.length);
    this.#keepRest();
  }

  /** Where the document's member `measurements` has its list. */
  #startOfList(text: string): number | null {
    const { cursor } = this.#reader;
    cursor.turnTo(text);
    if (text.startsWith("\uFEFF")) cursor.at = 1;
    if (!cursor.take(OPEN)) return null;
    do {
      const name = cursor.plain(64);
      if (name === null || !cursor.take(COLON)) return null;
      if (name === "measurements") return cursor.code() === OPEN_LIST ? cursor.at : null;
      if (!cursor.pass()) return null;
    } while (cursor.take(COMMA));
    return null;
  }

  #readOn(text: string): void {
    const { cursor } = this.#reader;
    const passed = this.#readOver(text);
    if (passed === null) return;
    // A piece most likely ends in the middle of something: what follows its last comma.
    cursor.turnTo(text, passed, Math.max(passed, text.lastIndexOf(",") + 1));
    this.#readList(cursor.limit);
    this.#keepRest();
  }

  #keepRest(): void {
    const { cursor } = this.#reader;
    const rest = cursor.text.slice(cursor.at);
    if (this.#stage === "behind the list") this.#behind.push(rest);
    else this.#begun = rest;
    if (this.#begun.length > LONGEST) this.#stage = "not plain";
  }

  /**
   * Over the cut between two pieces. Only what is needed is put behind the first one's end: a text
   * that is put together is slower to read.
   *
   * @returns how much of the second is read; null where that is all there is to do with it
   */
  #readOver(text: string): number | null {
    const { cursor } = this.#reader;
    for (let more = NEARLY_ALL; this.#begun !== ""; more *= 8) {
      const { length } = this.#begun;
      cursor.turnTo(this.#begun + text.slice(0, more));
      this.#readList(length);
      if (this.#stage === "behind the list") {
        this.#behind.push(cursor.text.slice(cursor.at), text.slice(more));
      }
      if (this.#stage !== "in the list") return null;
      if (cursor.at >= length) return cursor.at - length;
      this.#begun = this.#begun.slice(cursor.at);
      if (more >= text.length) {
        this.#begun += text;
        if (this.#begun.length > LONGEST) this.#stage = "not plain";
        return null;
      }
    }
    return 0;
  }

  /** Until a place is reached, the list has ended or the text has, in the middle of something. */
  #readList(until: number): void {
    const { cursor } = this.#reader;
    while (this.#stage === "in the list" && cursor.at < until) {
      cursor.space();
      if (cursor.isAtEnd()) return;
      if (this.#expected !== "one" && cursor.code() === CLOSE_LIST) {
        cursor.at += 1;
        this.#stage = "behind the list";
      } else if (this.#expected === "comma") {
        if (cursor.take(COMMA)) this.#expected = "one";
        else this.#stage = "not plain";
      } else if (!this.#readOne()) {
        return;
      }
    }
  }

  /** False, with the cursor where it was, where the text ends before the measurement does. */
  #readOne(): boolean {
    const { cursor } = this.#reader;
    const start = cursor.at;
    let one: Legible<Measurement> | undefined | null = this.#reader.next();
    if (one === null) {
      cursor.at = start;
      const whole = cursor.pass();
      const parsed = whole ? parseJson(cursor.text.slice(start, cursor.at)) : null;
      if (parsed === null || parsed.problems.length > 0) {
        if (parsed !== null) this.#stage = "not plain";
        cursor.at = start;
        return false;
      }
      one = this.#readByForm(parsed.value);
    }
    this.#measurements.push(one);
    this.#expected = "comma";
    return true;
  }

  #readByForm(value: unknown): Legible<Measurement> | undefined {
    const quick = quickMeasurement(value);
    if (quick !== null) return quick;
    const pointer = below("/measurements", this.#measurements.length);
    const form = readForm(measurementSchema, value, pointer);
    for (const problem of form.problems) this.#problems.push(problem);
    return form.value;
  }
}
