import { sameBytes } from "@weighhouse/ledger/bytes";
import { LedgerError } from "@weighhouse/ledger/ledger-error";
import { parseTreeHead } from "@weighhouse/ledger/tree-head";
import type { TreeHead } from "@weighhouse/ledger/tree-head";
import { decodeVerifierKey, fingerprint } from "@weighhouse/ledger/verifier-key";
import type { VerifierKey } from "@weighhouse/ledger/verifier-key";
import type { Roots } from "./heads";
import { failed, judged, notPresent, ok } from "./line";
import type { CheckLine } from "./line";

/** Who signed the last tree head and the manifest; null where no good signature was found. */
export type Signers = { head: VerifierKey[] | null; manifest: VerifierKey[] | null };

/**
 * A forger can sign anew with a key of their own, so who signed says nothing until it is compared
 * with a key that the reader had before.
 */
export function checkKeysHeld(signers: Signers, trustedKeys: readonly string[]): CheckLine {
  const check = "keys you hold";
  if (trustedKeys.length === 0) {
    const names = [...new Set([...fingerprints(signers.head), ...fingerprints(signers.manifest)])];
    if (names.length === 0) return failed(check, "signed by nobody whose signature is good");
    return notPresent(check, `signed by ${names.join(", ")}, not checked against a key you hold`);
  }
  const held = new Set<string>();
  for (const text of trustedKeys) {
    const key = decode(text);
    if (typeof key === "string") return failed(check, `the key you gave: ${key}`);
    held.add(fingerprint(key.publicKey));
  }
  const faults = (["head", "manifest"] as const).flatMap((what) => {
    const names = fingerprints(signers[what]);
    if (names.some((name) => held.has(name))) return [];
    const by = names.length === 0 ? "no good signature" : `signed by ${names.join(", ")}`;
    return [`the ${what === "head" ? "last tree head" : "manifest"}: ${by}, which you don't hold`];
  });
  const names = new Set([...fingerprints(signers.head), ...fingerprints(signers.manifest)]);
  const known = [...names].filter((name) => held.has(name));
  return judged(check, faults, `signed by ${known.join(", ")}, which you hold`);
}

/** A head that the reader kept proves that nothing before it was touched, whoever signed since. */
export function checkHeadHeld(
  trustedHead: string | undefined,
  roots: Roots,
  ledger: string,
): CheckLine {
  const check = "tree head you hold";
  if (trustedHead === undefined) return notPresent(check, "none given");
  const head = readHead(trustedHead);
  if (typeof head === "string") return failed(check, `the head you gave: ${head}`);
  const { size } = roots;
  if (head.origin !== ledger) {
    return failed(
      check,
      `the head you hold is of the ledger ${head.origin}, this one is ${ledger}`,
    );
  }
  const root = roots.of(head.size);
  if (root === null) {
    return failed(
      check,
      `the head you hold is of ${head.size} entries, this archive has ${size}: it is older, or entries are missing`,
    );
  }
  if (!sameBytes(root, head.root)) {
    return failed(check, `the first ${head.size} entries are not those of the head you hold`);
  }
  const later = size - head.size;
  return ok(
    check,
    `the first ${head.size} entries are those of the head you hold; ${later} came later`,
  );
}

function fingerprints(signers: VerifierKey[] | null): string[] {
  return (signers ?? []).map(({ publicKey }) => fingerprint(publicKey));
}

function decode(text: string): VerifierKey | string {
  try {
    return decodeVerifierKey(text);
  } catch (error) {
    if (error instanceof LedgerError) return error.message;
    throw error;
  }
}

function readHead(text: string): TreeHead | string {
  try {
    return parseTreeHead(text);
  } catch (error) {
    if (error instanceof LedgerError) return error.message;
    throw error;
  }
}
