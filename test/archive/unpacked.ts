import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import { unpackFiles } from "@weighhouse/audit/zip/read";

const folders: string[] = [];

/** The archive's files in a folder of their own. */
export function unpacked(archive: Uint8Array): string {
  const folder = mkdtempSync(path.join(tmpdir(), "weighhouse-archive-"));
  folders.push(folder);
  for (const [name, content] of unpackFiles(archive)) {
    mkdirSync(path.dirname(path.join(folder, name)), { recursive: true });
    writeFileSync(path.join(folder, name), content);
  }
  return folder;
}

export function removeUnpacked(): void {
  for (const folder of folders.splice(0)) rmSync(folder, { recursive: true });
}
