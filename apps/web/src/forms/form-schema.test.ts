import { expect, test } from "vitest";
import { z } from "zod";
import { formSchema, stepsOfPointer } from "./form-schema";

const schema = formSchema({
  schema: z.strictObject({
    title: z.string().min(1),
    at: z.object({ sd: z.number() }),
  }),
  content: (values: { name: string; sd: string }) => ({
    title: values.name,
    at: { sd: values.sd === "" ? null : Number(values.sd) },
  }),
  field: (_values, path) => (path[0] === "title" ? "name" : "sd"),
});

test("content that the server's schema accepts comes out as the server reads it", async () => {
  expect(await schema.parseAsync({ name: "A", sd: "2" })).toEqual({ title: "A", at: { sd: 2 } });
});

test("each problem stands at the field that its content came from", async () => {
  const issues = (await schema.safeParseAsync({ name: "", sd: "" })).error?.issues ?? [];
  expect(issues.map((issue) => issue.path.join("."))).toEqual(["name", "sd"]);
  expect(issues[0]?.message).toBe("Empty; allowed is a text of at least 1 characters.");
});

test("what only the campaign shows is said together with what the schema finds, each place once", async () => {
  const strict = formSchema({
    schema: z.object({ title: z.string().min(1), at: z.object({ sd: z.number() }) }),
    content: (values: { title: string; sd: string }) => ({
      title: values.title,
      at: { sd: values.sd === "" ? null : Number(values.sd) },
    }),
    field: (_values, path) => String(path.at(-1)),
    further: async () => [
      { pointer: "/at/sd", code: "out-of-range" as const, found: "2", allowed: "below 1" },
    ],
  });
  const issues = async (values: { title: string; sd: string }) =>
    (await strict.safeParseAsync(values)).error?.issues.map(
      ({ path, message }) => `${path.join(".")}: ${message}`,
    );
  expect(await issues({ title: "", sd: "2" })).toEqual([
    "title: Empty; allowed is a text of at least 1 characters.",
    "sd: Found 2; allowed is below 1.",
  ]);
  expect(await issues({ title: "A", sd: "" })).toEqual(["sd: Empty; allowed is a number."]);
});

test("a JSON Pointer is taken apart as RFC 6901 says", () => {
  expect(stepsOfPointer("")).toEqual([]);
  expect(stepsOfPointer("/predictions/0/tolerance/sd")).toEqual([
    "predictions",
    0,
    "tolerance",
    "sd",
  ]);
  expect(stepsOfPointer("/a~1b/m~0n/01")).toEqual(["a/b", "m~n", "01"]);
});
