import { homedir } from "node:os";
import { join } from "node:path";
import { setTimeout as sleep } from "node:timers/promises";
import { parseTreeHead, verifyTreeHead } from "@weighhouse/ledger/tree-head";
import { nodeVerifySignature } from "@weighhouse/ledger/node-keys";
import { decodeVerifierKey } from "@weighhouse/ledger/verifier-key";
import type { VerifierKey } from "@weighhouse/ledger/verifier-key";
import { defineCommand } from "citty";
import { compareHeads } from "../compare-heads";
import { descriptions } from "../descriptions";
import { readBytes } from "../document-file";
import { Refusal, wrongUsage } from "../refusal";
import { ask, campaignAddress } from "../server";
import { harmless } from "../terminal";
import { keepWatchedHead, readWatchedHeads } from "../watched-heads";
import type { WatchedHead } from "../watched-heads";

export const watch = defineCommand({
  meta: { name: "watch", description: descriptions.watch },
  args: {
    url: {
      type: "positional",
      description: "Address of the campaign's page; or --campaign with WEIGHHOUSE_URL",
      required: false,
    },
    campaign: { type: "string", description: "Key of the campaign", valueHint: "KEY" },
    keep: {
      type: "string",
      description: "Folder of the heads that were seen; one in the home unless given",
      valueHint: "FOLDER",
    },
    key: {
      type: "string",
      description: "File with a public key that you hold (name+hash+base64, a line each)",
      valueHint: "FILE",
    },
    once: { type: "boolean", description: "Ask once and end" },
    every: {
      type: "string",
      description: "Seconds between askings; 60 unless given",
      valueHint: "SECONDS",
    },
  },
  async run({ args }) {
    const campaign = campaignOf(args.url, args.campaign);
    const everyMs = secondsOf(args.every, args.once === true) * 1000;
    const keys = args.key === undefined ? null : await readKeys(args.key);
    const { host } = campaignAddress(campaign, "");
    const folder =
      args.keep ?? join(homedir(), ".weighhouse", "watch", host.replace(":", "-"), campaign);
    const asking = { campaign, folder, keys };
    if (args.once) return askOnce(asking);
    for (;;) {
      await askOnce(asking).catch(sayUnreachable);
      await sleep(everyMs);
    }
  },
});

type Asking = { campaign: string; folder: string; keys: VerifierKey[] | null };

/** A head more is kept only where it goes on from the last: what was watched stays to compare with. */
async function askOnce({ campaign, folder, keys }: Asking): Promise<void> {
  const kept = await readWatchedHeads(folder);
  const now = await askHead(campaign);
  const signed = signatureWords(now, keys);
  const last = kept.at(-1);
  const size = now.head.size;
  if (last === undefined) {
    await keepWatchedHead(folder, now);
    return say(`${campaign}: ${size} entries; this first head is kept in ${folder}; ${signed}`);
  }
  const fault = await compareHeads(campaign, last, now);
  if (fault !== null) {
    const where = await whereIn(campaign, kept, now);
    throw new Refusal(1, [
      `${campaign}: the ledger was rewritten: ${fault}; ${where}`,
      `the heads kept in ${folder} were signed before; ${signed}`,
    ]);
  }
  if (size > last.head.size) await keepWatchedHead(folder, now);
  const more = size === last.head.size ? "nothing new" : `${size - last.head.size} more`;
  say(`${campaign}: ${size} entries, ${more}; nothing before was touched; ${signed}`);
}

async function askHead(campaign: string): Promise<WatchedHead> {
  const address = campaignAddress(campaign, "ledger/head");
  const note = new TextDecoder().decode(await ask(address, { accept: "text/plain" }));
  try {
    return { note, head: parseTreeHead(note) };
  } catch (cause) {
    throw new Refusal(3, [`${address.href} answered with something that is no tree head`], {
      cause,
    });
  }
}

/** Between which of the heads kept the change lies: the last that still holds and the next. */
async function whereIn(campaign: string, kept: WatchedHead[], now: WatchedHead): Promise<string> {
  let good = 0;
  for (const old of kept) {
    if ((await compareHeads(campaign, old, now)) !== null) {
      return `the first change is among the entries ${good} to ${old.head.size - 1}`;
    }
    good = old.head.size;
  }
  return "the next asking found no change";
}

function signatureWords({ note }: WatchedHead, keys: VerifierKey[] | null): string {
  if (keys === null) return "its signature is not checked against a key you hold (--key)";
  const verified = verifyTreeHead(note, keys, nodeVerifySignature);
  if (verified.ok) return `signed by ${verified.signedBy.map(({ name }) => name).join(", ")}`;
  throw new Refusal(1, [`the head isn't signed by a key you hold: ${harmless(verified.detail)}`]);
}

async function readKeys(path: string): Promise<VerifierKey[]> {
  const lines = new TextDecoder().decode(await readBytes(path)).split("\n");
  try {
    return lines.filter((line) => line.trim() !== "").map(decodeVerifierKey);
  } catch (error) {
    throw wrongUsage(`${path}: ${error instanceof Error ? error.message : String(error)}`);
  }
}

/** The address of a campaign's page, or of something below it, also says which server is asked. */
function campaignOf(url: string | undefined, key: string | undefined): string {
  const found = url === undefined ? key : (/\/campaigns\/([^/?#]+)/.exec(url)?.[1] ?? url);
  if ((url === undefined) === (key === undefined)) {
    throw wrongUsage("found neither or both of an address and --campaign; allowed is one of them");
  }
  if (found === undefined || !/^[a-z0-9][a-z0-9-]{0,63}$/.test(found)) {
    throw wrongUsage(
      `found ${url ?? `--campaign ${key}`}; allowed https://…/campaigns/KEY, or --campaign KEY with WEIGHHOUSE_URL`,
    );
  }
  if (url !== undefined) process.env["WEIGHHOUSE_URL"] = url.slice(0, serverEnd(url));
  return found;
}

function serverEnd(url: string): number {
  const end = url.search(/(\/api\/v1)?\/campaigns\//);
  if (/^https?:\/\//.test(url) && end > 0) return end;
  throw wrongUsage(`found ${url}; allowed https://…/campaigns/KEY`);
}

function secondsOf(every: string | undefined, once: boolean): number {
  if (every !== undefined && once) throw wrongUsage("found --once and --every; allowed is one");
  const seconds = Number(every ?? 60);
  if (Number.isInteger(seconds) && seconds >= 1 && seconds <= 86_400) return seconds;
  throw wrongUsage(`found --every ${every}; allowed 1 to 86400 whole seconds`);
}

/** A server that is down for a while is no rewritten ledger: it is said, and asked again. */
function sayUnreachable(error: unknown): void {
  if (!(error instanceof Refusal) || error.exitCode !== 3) throw error;
  for (const line of error.lines) process.stderr.write(`${line}\n`);
}

function say(line: string): void {
  process.stdout.write(`${harmless(line)}\n`);
}
