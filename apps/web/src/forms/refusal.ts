import type { Problem } from "@weighhouse/campaign/problem";
import { problemWords, stepsOfPointer } from "./form-schema";

/** A refused call, as a form shows it. */
export interface Refusal {
  message: string;
  problems: Problem[];
  /** The session has ended: signing in again is enough, what was typed is kept. */
  signedOut: boolean;
}

/** What a failed call says; a network failure and an unforeseen one have words of their own. */
export function refusalOf(error: unknown): Refusal {
  const data = field(error, "data");
  const refusal = field(data, "refusal");
  const message = field(error, "message");
  if (data === undefined)
    return {
      message: "The server could not be reached. What you typed is kept; try again in a moment.",
      problems: [],
      signedOut: false,
    };
  const problems = field(refusal, "problems");
  return {
    message: typeof message === "string" && message !== "" ? message : "The server refused this.",
    problems: Array.isArray(problems) ? problems.filter(isProblem) : [],
    signedOut: field(refusal, "code") === "not-signed-in",
  };
}

/** Problems at their fields, and those that belong to no field of the form. */
export function placeProblems(
  problems: readonly Problem[],
  options: {
    /** The part of a pointer that leads to the form's content, `/hypothesis` say. */
    under: RegExp;
    field: (path: (string | number)[]) => string;
    isField: (name: string) => boolean;
  },
): { placed: { field: string; message: string }[]; loose: string[] } {
  const placed: { field: string; message: string }[] = [];
  const loose: string[] = [];
  for (const problem of problems) {
    const name = options.field(stepsOfPointer(problem.pointer.replace(options.under, "")));
    if (options.isField(name)) placed.push({ field: name, message: problemWords(problem) });
    else loose.push(`${problem.pointer || "The whole"}: ${problemWords(problem)}`);
  }
  return { placed, loose };
}

function field(value: unknown, name: string): unknown {
  return typeof value === "object" && value !== null
    ? ((value as Record<string, unknown>)[name] ?? undefined)
    : undefined;
}

function isProblem(value: unknown): value is Problem {
  return ["pointer", "found", "allowed"].every((name) => typeof field(value, name) === "string");
}
