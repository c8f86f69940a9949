import { expect, test } from "vitest";
import { problemLine } from "../problem";
import { problemsAfter } from "./documents";
import type { Open } from "./documents";

/** The rule, the change to the right document, and the lines that it gives; none where it's right still. */
export type Case = [rule: string, change: (document: Open) => void, lines: string[]];

/** What is wrong after each change, with its pointer and its words, and nothing else. */
export function check(cases: Case[]): void {
  test.each(cases)("%s", (_rule, change, lines) => {
    expect(problemsAfter(change).map(problemLine)).toEqual(lines);
  });
}

/** The index of the measurement that `add` adds. */
export const NEW = "/measurements/15";

export function add(measurement: Open) {
  return (document: Open) => void document.measurements.push({ id: "new", ...measurement });
}

/** A change of the first hypothesis. */
export function slip(change: (hypothesis: Open) => void) {
  return (document: Open) => void change(document.hypotheses[0]);
}

/** Other fields in a prediction of the first hypothesis. */
export function predict(index: number, fields: Open) {
  return (document: Open) => void Object.assign(document.hypotheses[0].predictions[index], fields);
}

export function place(index: number): string {
  return `/hypotheses/0/predictions/${index}`;
}
