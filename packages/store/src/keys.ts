import { randomBytes } from "node:crypto";
import {
  chmodSync,
  constants,
  copyFileSync,
  existsSync,
  mkdirSync,
  readFileSync,
  renameSync,
  statSync,
  writeFileSync,
} from "node:fs";
import path from "node:path";
import { createPrivateKeyPem, signerFromPem } from "@weighhouse/ledger/node-keys";
import type { TreeHeadSigner } from "@weighhouse/ledger/tree-head";
import { decodeVerifierKey, encodeVerifierKey, fingerprint } from "@weighhouse/ledger/verifier-key";
import { SEAL_KEY_BYTES, sealKeyOf } from "./seal-key";
import type { SealKey } from "./seal-key";
import { StoreError } from "./store-error";

export type KeysOptions = {
  folder: string;
  /** Key name of the signature lines, used when the key is made: the server's name without scheme. */
  name: string;
  /** Only the launcher with the embedded database makes keys by itself. */
  make: boolean;
};

const PRIVATE = "tree-heads.pem";
const PUBLIC = "tree-heads.vkey";
const SEALS = "seals.key";

/** Reads the signing key of a folder; with `make`, makes folder and key if there is none. */
export async function openKeys({ folder, name, make }: KeysOptions): Promise<TreeHeadSigner> {
  const privateFile = path.join(folder, PRIVATE);
  const publicFile = path.join(folder, PUBLIC);
  if (!existsSync(privateFile)) {
    if (!make) throw refusal(`no ${privateFile}`, "a folder with the installation's key");
    makeKey(folder, name);
  }
  requirePrivate(privateFile);
  // The name is part of every signature, so it is kept with the key, not taken from settings.
  const verifier = readPublic(publicFile);
  const signer = signerFromPem(readFileSync(privateFile, "utf8"), verifier.name);
  if (fingerprint(signer.publicKey) !== fingerprint(verifier.publicKey)) {
    throw refusal(`${PUBLIC} of another key than ${PRIVATE}`, "the two halves of one key");
  }
  return signer;
}

/**
 * Puts a new signing key in the place of a folder's, under the same name. The old one stays beside
 * it as `tree-heads-<first 16 digits of its fingerprint>`: heads signed by it stay good, and a process
 * that holds it still goes on until its next start.
 *
 * @param enrol lists the new key in the database, which must be done before anything is signed by it
 */
export async function rotateKey(
  folder: string,
  enrol: (old: TreeHeadSigner, next: TreeHeadSigner) => Promise<void>,
): Promise<TreeHeadSigner> {
  const old = await openKeys({ folder, name: "", make: false });
  const pem = createPrivateKeyPem();
  const next = signerFromPem(pem, old.name);
  const draft = (file: string) => path.join(folder, `next-${file}`);
  writeFileSync(draft(PUBLIC), `${encodeVerifierKey(next)}\n`, { mode: 0o600 });
  writeFileSync(draft(PRIVATE), pem, { mode: 0o600 });
  await enrol(old, next);
  for (const file of [PUBLIC, PRIVATE]) {
    const retired = file.replace(".", `-${fingerprint(old.publicKey).slice(0, 16)}.`);
    copyFileSync(path.join(folder, file), path.join(folder, retired), constants.COPYFILE_EXCL);
    renameSync(draft(file), path.join(folder, file));
  }
  return next;
}

/**
 * Reads the key of held seals, 32 bytes; with `make`, makes it if there is none. Null without one:
 * then this installation holds no seals.
 */
export function openSealKey({
  folder,
  make,
}: Pick<KeysOptions, "folder" | "make">): SealKey | null {
  const file = path.join(folder, SEALS);
  if (!existsSync(file)) {
    if (!make) return null;
    writeFileSync(file, randomBytes(SEAL_KEY_BYTES), { mode: 0o600, flag: "wx" });
  }
  requirePrivate(file);
  const bytes = new Uint8Array(readFileSync(file));
  if (bytes.length === SEAL_KEY_BYTES) return sealKeyOf(bytes);
  throw refusal(`${file} of ${bytes.length} bytes`, `${SEAL_KEY_BYTES} random bytes`);
}

function requirePrivate(file: string): void {
  const { mode } = statSync(file);
  if ((mode & 0o077) !== 0) {
    throw refusal(`${file} with mode ${(mode & 0o777).toString(8)}`, "mode 600");
  }
}

function makeKey(folder: string, name: string): void {
  mkdirSync(folder, { recursive: true, mode: 0o700 });
  chmodSync(folder, 0o700);
  const pem = createPrivateKeyPem();
  const text = `${encodeVerifierKey(signerFromPem(pem, name))}\n`;
  // The public half first: with the private one there, the key counts as made.
  writeFileSync(path.join(folder, PUBLIC), text, { mode: 0o600 });
  writeFileSync(path.join(folder, PRIVATE), pem, { mode: 0o600, flag: "wx" });
}

function readPublic(file: string): ReturnType<typeof decodeVerifierKey> {
  try {
    return decodeVerifierKey(readFileSync(file, "utf8"));
  } catch (cause) {
    throw new StoreError("bad-keys", `WEIGHHOUSE_KEYS: found no verifier key in ${file}`, {
      cause,
    });
  }
}

function refusal(found: string, allowed: string): StoreError {
  return new StoreError("bad-keys", `WEIGHHOUSE_KEYS: found ${found}; allowed is ${allowed}`);
}
