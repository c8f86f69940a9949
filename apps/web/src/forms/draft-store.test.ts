import { expect, test } from "vitest";
import { clearDraft, readDraft, saveDraft, type DraftStorage } from "./draft-store";

function memory(): DraftStorage {
  const held = new Map<string, string>();
  return {
    getItem: (key) => held.get(key) ?? null,
    setItem: (key, text) => void held.set(key, text),
    removeItem: (key) => void held.delete(key),
  };
}

const shape = { title: "", rows: [{ value: "" }] };
const draft = { savedAt: "2031-03-01T00:00:00Z", values: { title: "A", rows: [{ value: "1" }] } };

test("a draft comes back as it was typed, under its own name only", () => {
  const storage = memory();
  expect(saveDraft(storage, "post", draft)).toBe(true);
  expect(readDraft(storage, "post", shape)).toEqual(draft);
  expect(readDraft(storage, "other", shape)).toBeNull();
});

test("a cleared draft is gone", () => {
  const storage = memory();
  saveDraft(storage, "post", draft);
  clearDraft(storage, "post");
  expect(readDraft(storage, "post", shape)).toBeNull();
});

test("a draft of an earlier shape of the form is not restored", () => {
  const storage = memory();
  saveDraft(storage, "post", { savedAt: draft.savedAt, values: { title: "A" } });
  expect(readDraft(storage, "post", shape)).toBeNull();
  storage.setItem("weighhouse:draft:post", "{");
  expect(readDraft(storage, "post", shape)).toBeNull();
});

test("a browser that refuses to store says so and breaks nothing", () => {
  const refusing: DraftStorage = {
    getItem: () => {
      throw new Error("denied");
    },
    setItem: () => {
      throw new Error("quota");
    },
    removeItem: () => {
      throw new Error("denied");
    },
  };
  expect(saveDraft(refusing, "post", draft)).toBe(false);
  expect(readDraft(refusing, "post", shape)).toBeNull();
  expect(() => clearDraft(refusing, "post")).not.toThrow();
});
