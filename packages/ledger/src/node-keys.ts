import { createPrivateKey, createPublicKey, generateKeyPairSync, sign, verify } from "node:crypto";
import type { KeyObject } from "node:crypto";
import { LedgerError } from "./ledger-error";
import type { VerifySignature } from "./signed-note";
import type { TreeHeadSigner } from "./tree-head";
import { verifierKey } from "./verifier-key";

/** SubjectPublicKeyInfo of Ed25519 (RFC 8410) before the 32 bytes of the key. */
const SPKI_PREFIX = Buffer.from("302a300506032b6570032100", "hex");

/** A new Ed25519 private key as PEM (PKCS #8). Draws on the system's randomness. */
export function createPrivateKeyPem(): string {
  const { privateKey } = generateKeyPairSync("ed25519");
  return privateKey.export({ type: "pkcs8", format: "pem" }).toString();
}

/**
 * A signer of tree heads from a PEM private key.
 *
 * @throws {LedgerError} `not-a-key` where the text holds no Ed25519 private key
 */
export function signerFromPem(pem: string, name: string): TreeHeadSigner {
  let privateKey: KeyObject;
  try {
    privateKey = createPrivateKey(pem);
  } catch (cause) {
    throw new LedgerError("not-a-key", "found no private key; allowed is PEM (PKCS #8)", { cause });
  }
  if (privateKey.asymmetricKeyType !== "ed25519") {
    throw new LedgerError(
      "not-a-key",
      `found a key of type ${privateKey.asymmetricKeyType}; allowed is ed25519`,
    );
  }
  const spki = createPublicKey(privateKey).export({ type: "spki", format: "der" });
  const publicKey = new Uint8Array(spki.subarray(SPKI_PREFIX.length));
  return {
    ...verifierKey(name, publicKey),
    sign: (bytes) => new Uint8Array(sign(null, bytes, privateKey)),
  };
}

/** Ed25519 of node:crypto (OpenSSL), some ten times as fast as `nobleVerifySignature`. */
export const nodeVerifySignature: VerifySignature = (signature, message, publicKey) => {
  const key = createPublicKey({
    key: Buffer.concat([SPKI_PREFIX, publicKey]),
    format: "der",
    type: "spki",
  });
  return verify(null, message, key, signature);
};
