import { expect, test } from "vitest";
import { nobleHasher } from "./noble-hasher";
import { nodeHasher } from "./node-hasher";
import { sealDigest } from "./seal";
import type { Sealed } from "./seal";

const sealed: Sealed = {
  ledger: "house.example/1",
  team: "reeds",
  hypothesis: "warm-spring",
  measurand: "vapour-june",
  nonce: `${"00".repeat(31)}2a`,
  content: {
    tolerance: { sd: 2, family: "normal" },
    measurand: "vapour-june",
    expected: 20,
  },
};

// Computed by Python 3's json.dumps(…, sort_keys=True, separators=(",", ":")) and hashlib.sha256,
// which for these values (ASCII, whole numbers) is RFC 8785.
const ofPrediction = "935fa2d8989a5cecbbf8522150b0b59e4b24bd0b69a9d7f5882fbf2371d63e45";
const ofNobodys = "681bc3b077809d33a8f18f582dc8ce31e42c054e48fa62a1c5a944766762139a";

test.each([nodeHasher, nobleHasher])(
  "a seal's digest is what another implementation finds",
  (hasher) => {
    expect(sealDigest(hasher, sealed)).toBe(ofPrediction);
    expect(sealDigest(hasher, { ...sealed, team: null, hypothesis: null })).toBe(ofNobodys);
  },
);

test.each(["ledger", "team", "hypothesis", "measurand", "nonce", "content"] as const)(
  "a seal binds its %s",
  (field) => {
    const changed = field === "content" ? { ...(sealed.content as object), expected: 21 } : "other";
    expect(sealDigest(nodeHasher, { ...sealed, [field]: changed })).not.toBe(ofPrediction);
  },
);
