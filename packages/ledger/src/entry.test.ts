import { describe, expect, it } from "vitest";
import { hex, utf8 } from "./bytes";
import { canonicalJson } from "./canonical";
import { leafHash, MAX_PAYLOAD_BYTES, payloadDigest, payloadText, readEntry } from "./entry";
import type { Entry } from "./entry";
import sha256 from "./fixtures/fips180-4.json";
import { nobleHasher } from "./noble-hasher";
import { nodeHasher } from "./node-hasher";

const entry: Entry = {
  v: 1,
  campaign: "lake-ice",
  seq: 7,
  at: "2031-03-01T00:00:00.000001Z",
  by: { member: "m-1", team: null },
  kind: "measurements.posted",
  payloadSha256: "ab".repeat(32),
};

it("the leaf hash is SHA-256 of a zero byte and the canonical entry", () => {
  const text =
    '{"at":"2031-03-01T00:00:00.000001Z","by":{"member":"m-1","team":null},"campaign":"lake-ice",' +
    `"kind":"measurements.posted","payloadSha256":"${"ab".repeat(32)}","seq":7,"v":1}`;
  expect(canonicalJson(entry)).toBe(text);
  const expected = hex(nodeHasher(utf8(`\u0001${text}`).fill(0, 0, 1)));
  expect(hex(leafHash(nodeHasher, entry))).toBe(expected);
  expect(hex(leafHash(nobleHasher, entry))).toBe(expected);
});

it("a payload's digest is SHA-256 of its text in UTF-8", () => {
  const abc = sha256.rows.find((row) => row.text === "abc");
  expect(payloadDigest(nodeHasher, "abc")).toBe(abc?.sha256);
  expect(payloadDigest(nodeHasher, "é")).toBe(hex(nodeHasher(Uint8Array.of(0xc3, 0xa9))));
});

it("texts that UTF-8 would make equal have no digest", () => {
  expect(() => payloadDigest(nodeHasher, "\ud800")).toThrow("half a surrogate pair");
});

it("a payload of a byte more than 1 MiB is refused, counted in UTF-8", () => {
  // Two quotes, and two bytes for each é.
  const fits = "é".repeat((MAX_PAYLOAD_BYTES - 2) / 2);
  expect(utf8(payloadText(fits))).toHaveLength(MAX_PAYLOAD_BYTES);
  expect(() => payloadText(`${fits}a`)).toThrow(`found a payload of ${MAX_PAYLOAD_BYTES + 1}`);
});

it("an entry reads back, by a member of a team, a member, and the system", () => {
  for (const by of [entry.by, { member: "m-1", team: "north" }, { system: true }] as const) {
    expect(readEntry(JSON.parse(canonicalJson({ ...entry, by })))).toEqual({ ...entry, by });
  }
});

describe("what isn't an entry is refused at its property", () => {
  it.each([
    ["another version", { v: 2 }, "v: found 2"],
    ["a campaign that is no key", { campaign: "Lake Ice" }, "campaign: found"],
    ["a negative seq", { seq: -1 }, "seq: found -1"],
    ["a fraction", { seq: 0.5 }, "seq: found 0.5"],
    ["milliseconds", { at: "2031-03-01T00:00:00.000Z" }, "at: found"],
    ["another time zone", { at: "2031-03-01T00:00:00.000000+01:00" }, "at: found"],
    ["30 February", { at: "2031-02-30T00:00:00.000000Z" }, "at: found"],
    ["hour 24", { at: "2031-02-01T24:00:00.000000Z" }, "at: found"],
    ["no author", { by: null }, "by: found null"],
    ["an author with a name", { by: { member: "m", team: null, name: "N" } }, "by: found"],
    ["a system that isn't", { by: { system: false } }, "by/system: found false"],
    ["an author who is both", { by: { system: true, member: "m" } }, "by: found"],
    ["a kind that is no kind", { kind: "Posted" }, "kind: found"],
    ["a digest in capitals", { payloadSha256: "AB".repeat(32) }, "payloadSha256: found"],
    ["another property", { extra: 1 }, "the entry: found"],
  ])("%s", (_, change, message) => {
    expect(() => readEntry({ ...entry, ...change })).toThrow(message);
  });

  it("a missing property", () => {
    const { kind: _, ...rest } = entry;
    expect(() => readEntry(rest)).toThrow("the entry: found");
    expect(() => readEntry(null)).toThrow("the entry: found null");
  });
});
