import { readForm } from "@weighhouse/campaign/form";
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
  /** What only the whole campaign shows: pointers into the content, which may be wrong in places. */
  further?: (content: unknown) => Promise<readonly Problem[]>;
}

/**
 * The server's schema, read through a form: text becomes content, the schema judges the content,
 * and each of its problems goes back to the field that the content came from.
 */
export function formSchema<Values, Content>(
  reading: FormReading<Values, Content>,
): z.ZodType<Content, Values> {
  const { schema, further } = reading;
  return z.custom<Values>().transform(async (values, context) => {
    const content = reading.content(values);
    const put = (problem: Problem) => {
      const path = stepsOfPointer(problem.pointer);
      const field = reading.field?.(values, path) ?? path.join(".");
      context.addIssue({
        code: "custom",
        path: field === "" ? [] : field.split("."),
        message: problemWords(problem),
      });
    };
    const read = readForm(schema, content, "");
    const known = new Set(read.problems.map(({ pointer }) => pointer));
    const more = ((await further?.(content)) ?? []).filter(({ pointer }) => !known.has(pointer));
    const problems = [...read.problems, ...more];
    problems.forEach(put);
    return problems.length > 0 ? z.NEVER : (read.value as Content);
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
export function problemWords({ found, allowed }: Pick<Problem, "found" | "allowed">): string {
  const empty = found === '""' || found === "null" || found === "nothing";
  return empty ? `Empty; allowed is ${allowed}.` : `Found ${found}; allowed is ${allowed}.`;
}
