import * as z from "zod";
import type { Measurement } from "@weighhouse/campaign/document";
import { measurementContentSchema } from "@weighhouse/campaign/entries";
import type { MeasurementContent } from "@weighhouse/campaign/entries";
import { line } from "@weighhouse/campaign/fields";
import { readForm } from "@weighhouse/campaign/form";
import { measurementFields } from "@weighhouse/campaign/measurement";
import type { Problem } from "@weighhouse/campaign/problem";
import { invalid } from "./desk-error";

/** What a measurement should be and why; its content is read once it is known what is left out. */
export const correctionSchema = z.strictObject({
  measurement: z
    .record(z.string(), z.unknown())
    .describe("A measurement's fields, as they are posted; id says which it is."),
  reason: line,
});

/** `kept`: what a correction leaves out stays as it is, as of a table without some columns. */
export const leftOutSchema = z.enum(["default", "kept"]);

export type Correction = { measurement: MeasurementContent; reason: string };

/**
 * The new contents, whole. A team that is left out stays; all else becomes the default, or stays too.
 *
 * @throws {DeskError} `invalid` with pointers below `/corrections`
 */
export function correctedContents(
  corrections: readonly z.output<typeof correctionSchema>[],
  there: ReadonlyMap<string, Measurement>,
  leftOut: z.output<typeof leftOutSchema>,
): Correction[] {
  const problems: Problem[] = [];
  const read = corrections.map(({ measurement, reason }, index) => {
    const before = there.get(String(measurement["id"]))!;
    const whole = { ...(leftOut === "kept" ? keptOf(before, measurement) : {}), ...measurement };
    const pointer = `/corrections/${index}/measurement`;
    const form = readForm(measurementContentSchema, whole, pointer);
    problems.push(...form.problems);
    const content = form.value as MeasurementContent;
    return { measurement: { ...content, team: content?.team ?? before.team }, reason };
  });
  if (problems.length > 0) throw invalid(problems);
  return read;
}

/** A result is one thing: where a part of it is given, none of the old one stays. */
const resultFields = [
  "value",
  "sd",
  "sdDex",
  "plus",
  "minus",
  "limit",
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
] as const satisfies readonly (keyof Measurement)[];

function keptOf(before: Measurement, given: Record<string, unknown>): Record<string, unknown> {
  const fields = Object.keys(measurementFields) as (keyof typeof measurementFields)[];
  const hasResult = resultFields.some((field) => given[field] !== undefined);
  const isResult = (field: string) => (resultFields as readonly string[]).includes(field);
  return Object.fromEntries(
    fields
      .filter((field) => !(hasResult && isResult(field)))
      .map((field) => [field, before[field]]),
  );
}
