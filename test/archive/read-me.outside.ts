import { execFileSync } from "node:child_process";
import { readFileSync, writeFileSync } from "node:fs";
import path from "node:path";
import { afterAll, describe, expect, it } from "vitest";
import { marshArchives } from "./campaigns";
import { removeUnpacked, unpacked } from "./unpacked";

afterAll(removeUnpacked);

/** The README's commands as printed, with Debian's own tools and nothing before them. */
function run(folder: string): string[] {
  const readme = readFileSync(path.join(folder, "README.md"), "utf8");
  const blocks = [...readme.matchAll(/```bash\n(.*?)```/gs)].map((match) => match[1] as string);
  return blocks.map((block) =>
    execFileSync("/bin/bash", ["-euo", "pipefail", "-c", block], {
      cwd: folder,
      env: { PATH: "/usr/bin:/bin" },
      encoding: "utf8",
      stdio: ["ignore", "pipe", "pipe"],
    }),
  );
}

describe("the README's commands hold with sha256sum, openssl and jq", () => {
  it.each(marshArchives())("for %s", (_, archive) => {
    const said = run(unpacked(archive)).map((text) => text.trim().split("\n").at(-1));
    expect(said.slice(0, 5)).toEqual([
      "the files are those of the manifest",
      "the payloads are those of the entries",
      "the entries are in order",
      "the root is the signed one",
      "the signatures are good",
    ]);
    expect(said[5]).toMatch(/^[0-9a-f]{64}$/);
  });

  it("and stop at a changed payload", () => {
    const [, archive] = marshArchives()[0] as [string, Uint8Array];
    const folder = unpacked(archive);
    const file = path.join(folder, "payloads.ndjson");
    writeFileSync(file, readFileSync(file, "utf8").replace("19.2", "19.3"));
    expect(() => run(folder)).toThrow("1 computed checksum did NOT match");
  });
});
