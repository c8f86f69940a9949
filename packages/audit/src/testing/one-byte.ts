import type { VerifyReport } from "../checks/line";
import { unpackFiles } from "../zip/read";
import { tinyArchive } from "./tiny-campaign";
import { verify } from "./verify-marsh";
import { fieldsOf, WITHOUT_CONTENT } from "./zip-fields";

export type Fate = { field: string; fate: "found" | "harmless" | "missed" };

/** What becomes of one changed byte of an archive: found, harmless by proof, or missed. */
export class OneByte {
  readonly archive = tinyArchive();
  readonly #fields = fieldsOf(this.archive);
  readonly #files = contentOf(this.archive);

  /** @param by XORed to the byte; not 0 */
  change(at: number, by: number): Fate {
    const field = this.#fields[at] as string;
    const changed = this.archive.slice();
    changed[at] = (changed[at] as number) ^ by;
    if (!this.#leavesFiles(changed)) {
      // Other files, or none: the report must say so.
      const report: VerifyReport = verify(changed);
      return { field, fate: report.ok ? "missed" : "found" };
    }
    // The same files by name and byte; and a field that could be changed without changing them.
    return { field, fate: WITHOUT_CONTENT.has(field) ? "harmless" : "missed" };
  }

  #leavesFiles(archive: Uint8Array): boolean {
    try {
      return contentOf(archive) === this.#files;
    } catch {
      return false;
    }
  }
}

function contentOf(archive: Uint8Array): string {
  return [...unpackFiles(archive)]
    .map(([path, bytes]) => `${path}\n${Buffer.from(bytes).toString("latin1")}`)
    .join("\n");
}
