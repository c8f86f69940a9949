import { checkContainer } from "./checks/container";
import { headPath, sizeOfTokenPath } from "./layout";
import { ZIP_LIMITS } from "./zip/limits";
import type { ZipLimits } from "./zip/limits";

/**
 * The time-stamp tokens of an archive, each with the note that it should stamp. Verifying a token is
 * asynchronous in browsers, checking an archive is not: so the tokens are verified first.
 *
 * @returns none where the archive can't be read, which its own check then says
 */
export function stampedHeads(
  archive: Uint8Array,
  limits: ZipLimits = ZIP_LIMITS,
): { token: Uint8Array; note: Uint8Array }[] {
  const { value: files } = checkContainer(archive, limits);
  return [...(files ?? [])].flatMap(([path, token]) => {
    const size = sizeOfTokenPath(path);
    const note = size === null ? undefined : files?.get(headPath(size));
    return note === undefined ? [] : [{ token, note }];
  });
}
