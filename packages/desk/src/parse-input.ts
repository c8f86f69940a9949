import type * as z from "zod";
import { readForm } from "@weighhouse/campaign/form";
import { invalid } from "./desk-error";

/** Reads a use-case's input by its schema; everything wrong is refused at once, field by field. */
export function parseInput<S extends z.ZodType>(schema: S, input: unknown): z.output<S> {
  const read = readForm(schema, input, "");
  if (read.problems.length > 0) throw invalid(read.problems);
  return read.value as z.output<S>;
}
