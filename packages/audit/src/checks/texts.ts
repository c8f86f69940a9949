import type { VerifierKey } from "@weighhouse/ledger/verifier-key";
import type { Files } from "./container";
import { judged, notPresent } from "./line";
import type { CheckLine } from "./line";
import type { Signers } from "./trust";
import { checkWritten } from "./written";
import { crateFile, proseFiles } from "../content";
import type { Substance } from "../content";
import { CRATE, sizeOfTokenPath } from "../layout";
import type { Manifest } from "../manifest";
import { signingOf } from "../signing";

/** README, methods, RO-Crate and check.py say of this archive what it is, and nothing else. */
export function checkTexts(
  files: Files,
  substance: Substance,
  { listed, signers }: { listed: Manifest["files"]; signers: Signers },
): CheckLine {
  const check = "texts";
  const signing = signingOf(keyOf(signers.manifest), keyOf(signers.head), {
    size: substance.manifest.size,
    stamped: listed.filter(({ path }) => sizeOfTokenPath(path) !== null).length,
  });
  const expected = [
    ...proseFiles(substance, signing),
    crateFile(
      substance,
      listed.filter(({ path }) => path !== CRATE),
    ),
  ];
  const written = checkWritten(files, expected, substance.manifest.writer);
  if (!written.compared) return notPresent(check, written.detail);
  return judged(check, written.faults, written.detail);
}

/** Without a good signature the line about it fails; the texts then name a key that nobody has. */
function keyOf(signers: VerifierKey[] | null): Pick<VerifierKey, "publicKey"> {
  return signers?.[0] ?? { publicKey: new Uint8Array(32) };
}
