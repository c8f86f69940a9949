import { execFileSync } from "node:child_process";
import { createHash, randomBytes } from "node:crypto";
import { readFileSync, writeFileSync } from "node:fs";
import path from "node:path";
import { archiveInput } from "@weighhouse/audit/testing/marsh-campaign";
import { writeArchive } from "@weighhouse/audit/write";
import { parseTreeHead } from "@weighhouse/ledger/tree-head";
import { timeStampRequest } from "@weighhouse/timestamps/request";
import { TestAuthority } from "@weighhouse/timestamps/testing/authority";
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

  describe("with time-stamps", () => {
    const authority = new TestAuthority();
    afterAll(() => authority.remove());

    /** The marsh, its last head stamped: over a text that should be the head's note. */
    function stamped(over: (note: string) => string): string {
      const input = archiveInput();
      const note = input.heads.at(-1)!;
      const digest = createHash("sha256").update(over(note)).digest();
      const request = timeStampRequest(new Uint8Array(digest), new Uint8Array(randomBytes(16)));
      const { size } = parseTreeHead(note);
      const timeStamps = [{ size, token: authority.answer(request) }];
      const folder = unpacked(writeArchive({ ...input, timeStamps }));
      writeFileSync(path.join(folder, "AUTHORITY.pem"), authority.root);
      return folder;
    }

    it("they are checked against the authority's certificate, and their time is told", () => {
      const said = run(stamped((note) => note))[5]!;
      expect(said).toMatch(/^Time stamp: .* GMT\nthe time-stamps are good\n$/m);
    });

    it("one over other bytes is found", () => {
      expect(() => run(stamped((note) => `${note}\n`))).toThrow("message imprint mismatch");
    });
  });

  it("and stop at a changed payload", () => {
    const [, archive] = marshArchives()[0] as [string, Uint8Array];
    const folder = unpacked(archive);
    const file = path.join(folder, "payloads.ndjson");
    writeFileSync(file, readFileSync(file, "utf8").replace("19.2", "19.3"));
    expect(() => run(folder)).toThrow("1 computed checksum did NOT match");
  });
});
