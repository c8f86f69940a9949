import { createHash, randomBytes } from "node:crypto";
import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { archiveInput } from "@weighhouse/audit/testing/marsh-campaign";
import { writeArchive } from "@weighhouse/audit/write";
import { parseTreeHead } from "@weighhouse/ledger/tree-head";
import { timeStampRequest } from "@weighhouse/timestamps/request";
import { TestAuthority } from "@weighhouse/timestamps/testing/authority";
import { afterAll, expect, test } from "vitest";
import { weighhouse } from "./testing/command";

// The tokens are OpenSSL's (`openssl ts`), made for the run.

const folder = mkdtempSync(join(tmpdir(), "weighhouse-stamped-"));
const authority = new TestAuthority();
afterAll(() => {
  rmSync(folder, { recursive: true });
  authority.remove();
});

const input = archiveInput();
const note = input.heads.at(-1)!;
const { size } = parseTreeHead(note);

/** The command's line on time-stamps, of an archive whose last head has one over a text. */
async function verified(stamped: string, ...more: string[]) {
  const digest = createHash("sha256").update(stamped).digest();
  const request = timeStampRequest(new Uint8Array(digest), new Uint8Array(randomBytes(16)));
  const path = join(folder, "stamped.zip");
  const timeStamps = [{ size, token: authority.answer(request) }];
  writeFileSync(path, writeArchive({ ...input, timeStamps }));
  const { code, out } = await weighhouse(["verify", path, ...more]);
  return { code, line: /^.*\btime-stamps .*$/m.exec(out)?.[0] };
}

test("an archive's time-stamps are verified, and against an authority that the reader trusts", async () => {
  const unchecked = await verified(note);
  expect(unchecked.code).toBe(0);
  expect(unchecked.line).toMatch(
    /^ok .*note stamped at .*Z by Test authority, not checked against a certificate you hold$/,
  );
  const root = join(folder, "root.pem");
  writeFileSync(root, authority.root);
  const checked = await verified(note, "--tsa-ca", root);
  expect(checked.code).toBe(0);
  expect(checked.line).toMatch(/^ok .*note stamped at .*Z by Test authority$/);
});

test("an archive with a time-stamp over another head, or of an authority not trusted, fails", async () => {
  const other = await verified(input.heads[0]!);
  expect(other.code).toBe(1);
  expect(other.line).toMatch(/^failed .*\.tsr: it stamps other bytes$/);
  const stranger = new TestAuthority("Stranger");
  const root = join(folder, "stranger.pem");
  writeFileSync(root, stranger.root);
  stranger.remove();
  const untrusted = await verified(note, "--tsa-ca", root);
  expect(untrusted.code).toBe(1);
  expect(untrusted.line).toMatch(/^failed .*lead to none that you trust/);
});
