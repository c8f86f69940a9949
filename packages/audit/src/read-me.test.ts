import { execFileSync } from "node:child_process";
import { mkdirSync, mkdtempSync, readdirSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import { afterAll, describe, expect, it } from "vitest";
import { fingerprint } from "@weighhouse/ledger/verifier-key";
import { line, replacing, tamper } from "./testing/forge";
import type { Change } from "./testing/forge";
import { placeStandIns } from "./testing/hand-tools";
import { archiveInput } from "./testing/marsh-campaign";
import { writeArchive } from "./write";
import { unpackFiles } from "./zip/read";

const input = archiveInput();
const archive = writeArchive(input);
const readme = new TextDecoder().decode(unpackFiles(archive).get("README.md"));
const blocks = [...readme.matchAll(/```bash\n(.*?)```/gs)].map((match) => match[1] as string);
const folders: string[] = [];

afterAll(() => {
  for (const folder of folders) rmSync(folder, { recursive: true });
});

const ways = [
  ["with the tools installed here", placeStandIns(scratch(), "missing")],
  ["with stand-ins for jq and openssl", placeStandIns(scratch(), "all")],
] as const;

describe.each(ways)("the README's commands, run as they stand %s", (_, tools) => {
  const run = (folder: string, block: string) => runIn(folder, { block, tools });

  it("hold for the archive, leave nothing behind, and give the signer's fingerprint", () => {
    const folder = unpack(archive);
    const before = readdirSync(folder);
    expect(blocks.map((block) => run(folder, block).trim().split("\n").at(-1))).toEqual([
      "the files are those of the manifest",
      "the payloads are those of the entries",
      "the entries are in order",
      "the root is the signed one",
      "the signatures are good",
      fingerprint(input.signer.publicKey),
    ]);
    expect(readdirSync(folder)).toEqual(before);
  });

  const lies: [string, number, Record<string, Change>][] = [
    ["a changed file", 0, { "campaign.json": replacing("21", "22") }],
    ["a changed payload", 1, { "payloads.ndjson": line(12, replacing("19.2", "19.3")) }],
    ["a payload left out", 1, { "payloads.ndjson": replacing(/[^\n]+\n$/, "") }],
    ["an entry's number", 2, { "ledger.ndjson": line(12, replacing('"seq":11', '"seq":12')) }],
    ["an entry's time", 2, { "ledger.ndjson": line(12, replacing("T03:", "T01:")) }],
    ["a changed entry", 3, { "ledger.ndjson": line(12, replacing("m-1", "m-2")) }],
    ["an entry left out", 3, { "ledger.ndjson": replacing(/[^\n]+\n$/, "") }],
    ["a changed manifest", 4, { "manifest.json": replacing("steaming", "streaming") }],
    ["a changed head", 4, { "heads/0000000017.note": replacing("\n17\n", "\n18\n") }],
  ];

  it.each(lies)("%s is found", (_, block, changes) => {
    const folder = unpack(tamper(archive, changes));
    expect(() => run(folder, blocks[block] as string)).toThrow("Command failed");
  });
});

function unpack(bytes: Uint8Array): string {
  const folder = scratch();
  for (const [name, content] of unpackFiles(bytes)) {
    mkdirSync(path.dirname(path.join(folder, name)), { recursive: true });
    writeFileSync(path.join(folder, name), content);
  }
  return folder;
}

function scratch(): string {
  const folder = mkdtempSync(path.join(tmpdir(), "weighhouse-hand-"));
  folders.push(folder);
  return folder;
}

function runIn(cwd: string, { block, tools }: { block: string; tools: string }): string {
  const script = `PATH="$1:$PATH"\n${block}`;
  return execFileSync("bash", ["-euo", "pipefail", "-c", script, "-", tools], {
    cwd,
    encoding: "utf8",
    stdio: ["ignore", "pipe", "pipe"],
  });
}
