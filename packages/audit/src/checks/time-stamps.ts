import type { Files } from "./container";
import type { ArchiveHead } from "./heads";
import { counted, failed, judged, notPresent } from "./line";
import type { CheckLine } from "./line";
import { sizeOfTokenPath } from "../layout";

/** What a token says, once its signature and its digest of the head's note are found good. */
export type TokenVerdict =
  { ok: true; at: string; authority: string } | { ok: false; reason: string };

/**
 * Verifies an RFC 3161 time-stamp token.
 *
 * @param token DER of the TimeStampResp or of its token
 * @param note the bytes of the signed head whose SHA-256 it stamps
 */
export type VerifyToken = (token: Uint8Array, note: Uint8Array) => TokenVerdict;

/**
 * Each `heads/*.tsr` stamps the head beside it.
 *
 * @param verifyToken absent where this build can't read tokens: then an archive that has some fails,
 *   since nothing is passed over
 */
export function checkTimeStamps(
  files: Files,
  heads: readonly ArchiveHead[],
  verifyToken: VerifyToken | undefined,
): CheckLine {
  const check = "time-stamps";
  const paths = [...files.keys()].filter((path) => path.endsWith(".tsr")).sort();
  if (paths.length === 0) return notPresent(check, "none");
  if (verifyToken === undefined) {
    return failed(check, `this version can't check ${counted(paths.length, "file")}: ${paths[0]}`);
  }
  const notes = new Map(heads.map(({ path, head }) => [head.size, path]));
  const faults: string[] = [];
  const said: string[] = [];
  for (const path of paths) {
    const notePath = notes.get(sizeOfTokenPath(path) ?? -1);
    if (notePath === undefined) {
      faults.push(`${path}: no head beside it`);
      continue;
    }
    const verdict = verifyToken(files.get(path)!, files.get(notePath)!);
    if (verdict.ok) said.push(`${notePath} stamped at ${verdict.at} by ${verdict.authority}`);
    else faults.push(`${path}: ${verdict.reason}`);
  }
  return judged(check, faults, said.join("; "));
}
