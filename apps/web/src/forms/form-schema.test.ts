import { expect, test } from "vitest";
import { z } from "zod";
import { formSchema, stepsOfPointer } from "./form-schema";

const schema = formSchema({
  schema: z.strictObject({ title: z.string().min(1, "a title"), at: z.object({ sd: z.number() }) }),
  content: (values: { name: string; sd: string }) => ({
    title: values.name,
    at: { sd: values.sd === "" ? null : Number(values.sd) },
  }),
  field: (_values, path) => (path[0] === "title" ? "name" : "sd"),
});

test("content that the server's schema accepts comes out as the server reads it", () => {
  expect(schema.parse({ name: "A", sd: "2" })).toEqual({ title: "A", at: { sd: 2 } });
});

test("each issue stands at the field that its content came from", () => {
  const issues = schema.safeParse({ name: "", sd: "" }).error?.issues ?? [];
  expect(issues.map((issue) => issue.path.join("."))).toEqual(["name", "sd"]);
  expect(issues[0]?.message).toBe("a title");
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
