import type { Problem } from "@weighhouse/campaign/problem";
import { z } from "zod";

type Path = readonly (string | number)[];

export interface FormReading<Values, Content> {
  /** The server's own schema. */
  schema: z.ZodType<Content>;
  /** The content that the form's text stands for. */
  content: (values: Values) => unknown;
  /** The form's field for a place in the content, where they differ. */
  field?: (values: Values, path: Path) => string;
  /** Words for one issue, where the schema's own are not for people at a form. */
  words?: (issue: z.core.$ZodIssue, content: unknown) => string;
}

/**
 * The server's schema, read through a form: text becomes content, the schema judges the content,
 * and each of its issues goes back to the field that the content came from.
 */
export function formSchema<Values, Content>(
  reading: FormReading<Values, Content>,
): z.ZodType<Content, Values> {
  return z.custom<Values>().transform((values, context) => {
    const content = reading.content(values);
    const result = reading.schema.safeParse(content);
    if (result.success) return result.data;
    for (const issue of result.error.issues) {
      const path = issue.path.map((step) => (typeof step === "symbol" ? String(step) : step));
      const field = reading.field?.(values, path) ?? path.join(".");
      context.addIssue({
        code: "custom",
        path: field === "" ? [] : field.split("."),
        message: reading.words?.(issue, content) ?? issue.message,
      });
    }
    return z.NEVER;
  }) as z.ZodType<Content, Values>;
}

/** `/predictions/0/tolerance/sd` as steps (RFC 6901); indexes as numbers. */
export function stepsOfPointer(pointer: string): (string | number)[] {
  if (pointer === "") return [];
  return pointer
    .slice(1)
    .split("/")
    .map((step) => step.replaceAll("~1", "/").replaceAll("~0", "~"))
    .map((step) => (/^(0|[1-9]\d*)$/.test(step) ? Number(step) : step));
}

/** What a problem says at its field: the place is plain there, so only found and allowed. */
export function problemWords(problem: Problem): string {
  return problem.found === ""
    ? problem.allowed
    : `Found ${problem.found}; allowed ${problem.allowed}.`;
}
