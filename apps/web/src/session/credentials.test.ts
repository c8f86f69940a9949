import { expect, test } from "vitest";
import { safeNext, signUpSchema } from "./credentials";

test("after signing in one comes back to a path of this site, and to no other site", () => {
  expect(safeNext("/campaigns/ice/register?x=1")).toBe("/campaigns/ice/register?x=1");
  for (const elsewhere of [
    "https://example.org",
    "//example.org",
    "/\\example.org",
    "",
    undefined,
  ]) {
    expect(safeNext(elsewhere)).toBe("/campaigns");
  }
});

test("an account with a short password is refused with what is allowed", () => {
  const read = signUpSchema.safeParse({ name: "A", email: "a@example.org", password: "short" });
  expect(read.error?.issues.map((issue) => issue.message)).toEqual([
    "10 characters or more are allowed",
  ]);
});
