/**
 * Writes an archive whose last head has a time-stamp of openssl's over the head's note and what is
 * given to be added to it. A program of its own: the browser tests' loader takes no JSON modules.
 */
import { createHash, randomBytes } from "node:crypto";
import { writeFileSync } from "node:fs";
import { archiveInput } from "@weighhouse/audit/testing/marsh-campaign";
import { writeArchive } from "@weighhouse/audit/write";
import { parseTreeHead } from "@weighhouse/ledger/tree-head";
import { timeStampRequest } from "@weighhouse/timestamps/request";
import { TestAuthority } from "@weighhouse/timestamps/testing/authority";

const [file, added = ""] = process.argv.slice(2) as [string, string?];
const authority = new TestAuthority();
const input = archiveInput();
const note = input.heads.at(-1)!;
const digest = createHash("sha256")
  .update(note + added)
  .digest();
const request = timeStampRequest(new Uint8Array(digest), new Uint8Array(randomBytes(16)));
const timeStamps = [{ size: parseTreeHead(note).size, token: authority.answer(request) }];
authority.remove();
writeFileSync(file, writeArchive({ ...input, timeStamps }));
