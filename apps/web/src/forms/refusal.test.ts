import { expect, test } from "vitest";
import { placeProblems, refusalOf } from "./refusal";

const problem = {
  pointer: "/hypothesis/weight",
  code: "too-small",
  found: "-1",
  allowed: "a number above 0",
};

test("a refusal of the desk brings its words and its problems", () => {
  const error = {
    message: "This hypothesis is not valid",
    data: { refusal: { code: "invalid", problems: [problem, { pointer: 1 }] } },
  };
  expect(refusalOf(error)).toEqual({
    message: "This hypothesis is not valid",
    problems: [problem],
    signedOut: false,
  });
});

test("an ended session is told apart from other refusals", () => {
  const error = {
    message: "Sign in first",
    data: { refusal: { code: "not-signed-in", problems: [] } },
  };
  expect(refusalOf(error).signedOut).toBe(true);
});

test("a failure of the network says that what was typed is kept", () => {
  expect(refusalOf(new TypeError("fetch failed")).message).toContain("kept");
});

test("problems stand at their fields, and what has no field is listed with its place", () => {
  const options = {
    under: /^\/hypothesis(?=\/|$)/,
    field: (path: (string | number)[]) => path.join("."),
    isField: (name: string) => name === "weight",
  };
  const elsewhere = { ...problem, pointer: "/campaign", found: "closed", allowed: "an open one" };
  expect(placeProblems([problem, elsewhere] as never, options)).toEqual({
    placed: [{ field: "weight", message: "Found -1; allowed is a number above 0." }],
    loose: ["/campaign: Found closed; allowed is an open one."],
  });
});
