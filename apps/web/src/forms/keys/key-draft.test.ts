import { expect, it } from "vitest";
import { emptyKey, keyContent, keySchema } from "./key-draft";

const now = new Date("2031-02-28T12:00:00Z");

it("a draft stands for the scopes that are ticked, and for a time so many days away", () => {
  const draft = { ...emptyKey, title: "  pipeline ", days: "30" };
  expect(keySchema.parse(keyContent(draft, now))).toEqual({
    title: "pipeline",
    scopes: ["read", "measurements:post"],
    expiresAt: "2031-03-30T12:00:00.000Z",
  });
});

it("no days stand for a key that holds until it is revoked", () => {
  expect(keyContent({ ...emptyKey, days: "" }, now)).toMatchObject({ expiresAt: null });
});

it("a key for nothing, or of no name, is refused", () => {
  const scopes = { ...emptyKey.scopes, read: false, "measurements:post": false };
  expect(keySchema.safeParse(keyContent({ ...emptyKey, scopes, title: "x" }, now)).success).toBe(
    false,
  );
  expect(keySchema.safeParse(keyContent(emptyKey, now)).success).toBe(false);
});
