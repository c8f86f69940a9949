import { base64, hex, utf8 } from "./bytes";
import { canonicalJson } from "./canonical";
import { leafHash, payloadDigest } from "./entry";
import type { Entry } from "./entry";
import { hashNode } from "./hasher";
import { nobleHasher } from "./noble-hasher";
import { formatTreeHead, signTreeHead } from "./tree-head";
import { createPrivateKeyPem, signerFromPem } from "./node-keys";
import { encodeVerifierKey } from "./verifier-key";
import { expect, test } from "vitest";
import { checkEntry } from "./check-entry";
import type { EntryEvidence } from "./check-entry";

/** The second of two entries, under a head that this test signs. */
function evidence(): EntryEvidence {
  const payload = canonicalJson({ key: "north-pier", title: "North pier" });
  const entry: Entry = {
    v: 1,
    campaign: "tides",
    seq: 1,
    at: "2031-03-01T00:00:00.000000Z",
    by: { system: true },
    kind: "facility.declared",
    payloadSha256: payloadDigest(nobleHasher, payload),
  };
  const sibling = nobleHasher(utf8("another leaf"));
  const root = hashNode(nobleHasher, sibling, leafHash(nobleHasher, entry));
  const signer = signerFromPem(createPrivateKeyPem(), "localhost");
  const note = signTreeHead(formatTreeHead({ origin: "ledger-1", size: 2, root }), signer);
  return {
    entry,
    payload,
    head: { size: 2, root: base64(root), note },
    proof: [hex(sibling)],
    keys: [encodeVerifierKey(signer)],
  };
}

const outcomes = (of: EntryEvidence) => checkEntry(of).map((line) => line.ok);

test("an entry that stands in the signed ledger passes each check", () => {
  expect(outcomes(evidence())).toEqual([true, true, true, true]);
});

test("content changed by one character fails as content, and nothing else does", () => {
  const good = evidence();
  const lines = checkEntry({ ...good, payload: good.payload.replace("N", "M") });
  expect(lines.filter((line) => !line.ok).map((line) => line.check)).toEqual([
    "the content is what the entry says",
  ]);
});

test("an entry whose time was changed is not in the ledger", () => {
  const good = evidence();
  const entry = { ...good.entry, at: "2031-02-01T00:00:00.000000Z" };
  const failed = checkEntry({ ...good, entry }).filter((line) => !line.ok);
  expect(failed).toEqual([
    { check: "the entry is in the ledger", ok: false, detail: "root-differs" },
  ]);
});

test("a root that was not signed is told apart from the one that was", () => {
  const good = evidence();
  const root = base64(nobleHasher(utf8("another root")));
  const failed = checkEntry({ ...good, head: { ...good.head, root } }).filter((line) => !line.ok);
  expect(failed.map((line) => line.check)).toEqual([
    "the entry is in the ledger",
    "the root is the one that was signed",
  ]);
});

test("a head signed by a key that is not among the known ones is not taken for signed", () => {
  const keys = evidence().keys;
  const failed = checkEntry({ ...evidence(), keys }).filter((line) => !line.ok);
  expect(failed.map((line) => line.check)).toEqual(["the head is signed"]);
});
