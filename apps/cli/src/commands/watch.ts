import { homedir } from "node:os";
import { join } from "node:path";
import { setTimeout as sleep } from "node:timers/promises";
import { parseTreeHead, verifyTreeHead } from "@weighhouse/ledger/tree-head";
import { nodeVerifySignature } from "@weighhouse/ledger/node-keys";
import { decodeVerifierKey } from "@weighhouse/ledger/verifier-key";
import type { VerifierKey } from "@weighhouse/ledger/verifier-key";
import { defineCommand } from "citty";
import { compareHeads } from "../compare-heads";
import { declaredRestore } from "../declared-restore";
import { descriptions } from "../descriptions";
import { readBytes } from "../document-file";
import { proveEntry } from "../prove-entry";
import { Refusal, wrongUsage } from "../refusal";
import { ask, campaignAddress } from "../server";
import { harmless } from "../terminal";
import { giveUpWatchedHeads, keepWatchedHead, readWatchedHeads } from "../watched-heads";
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
    entry: {
      type: "string",
      description: "Number of an entry to prove under that head; asks once and ends",
      valueHint: "NUMBER",
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
    const entry = entryOf(args.entry);
    const once = args.once === true || entry !== null;
    const everyMs = secondsOf(args.every, once) * 1000;
    const keys = args.key === undefined ? null : await readKeys(args.key);
    const { host } = campaignAddress(campaign, "");
    const folder =
      args.keep ?? join(homedir(), ".weighhouse", "watch", host.replace(":", "-"), campaign);
    const asking = { campaign, folder, keys };
    if (once) {
      const kept = await askOnce(asking);
      if (entry !== null) for (const line of await proveEntry(campaign, entry, kept)) say(line);
      return;
    }
    for (;;) {
      await askOnce(asking).catch(sayUnreachable);
      await sleep(everyMs);
    }
  },
});

type Asking = { campaign: string; folder: string; keys: VerifierKey[] | null };

/** A head more is kept only where it goes on from the last: what was watched stays to compare with. */
async function askOnce({ campaign, folder, keys }: Asking): Promise<WatchedHead> {
  const kept = await readWatchedHeads(folder);
  const now = await askHead(campaign);
  const signed = signatureWords(now, keys);
  const last = kept.at(-1);
  const size = now.head.size;
  if (last === undefined) {
    await keepWatchedHead(folder, now);
    say(`${campaign}: ${size} entries; this first head is kept in ${folder}; ${signed}`);
    return now;
  }
  const fault = await compareHeads(campaign, last, now);
  if (fault !== null) throw await changed({ campaign, folder, kept, now, fault, signed });
  if (size > last.head.size) await keepWatchedHead(folder, now);
  const more = size === last.head.size ? "nothing new" : `${size - last.head.size} more`;
  say(`${campaign}: ${size} entries, ${more}; nothing before was touched; ${signed}`);
  return now;
}

type Changed = Omit<Asking, "keys"> & {
  kept: WatchedHead[];
  now: WatchedHead;
  fault: string;
  signed: string;
};

/**
 * What is said of a ledger that doesn't go on from the last head. Where it says itself that it was
 * restored and names that head, what is left of it is watched from now on.
 */
async function changed({ campaign, folder, kept, now, fault, signed }: Changed): Promise<Refusal> {
  const { good, until } = await whereIn(campaign, kept, now);
  const last = kept.at(-1)!;
  const restore = await declaredRestore(campaign, last, { from: good, to: now.head.size });
  if (restore !== null) {
    await giveUpWatchedHeads(folder, restore.after);
    await keepWatchedHead(folder, now);
    return new Refusal(1, [
      `${campaign}: entries were lost: its database was put back to a backup, as its entry ${restore.seq} says (${harmless(restore.reason)})`,
      `lost are the entries ${restore.after} to ${last.head.size - 1}, or more; the heads of them are put aside in ${folder}, and the ledger is watched on from ${now.head.size} entries; ${signed}`,
    ]);
  }
  const where =
    until === null
      ? "the next asking found no change"
      : `the first change is among the entries ${good} to ${until - 1}`;
  return new Refusal(1, [
    `${campaign}: the ledger was rewritten: ${fault}; ${where}`,
    `the heads kept in ${folder} were signed before; ${signed}`,
  ]);
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

/** Between which of the heads kept the change lies: the size of the last that holds, and the next. */
async function whereIn(
  campaign: string,
  kept: WatchedHead[],
  now: WatchedHead,
): Promise<{ good: number; until: number | null }> {
  let good = 0;
  for (const old of kept) {
    if ((await compareHeads(campaign, old, now)) !== null) return { good, until: old.head.size };
    good = old.head.size;
  }
  return { good, until: null };
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

function entryOf(entry: string | undefined): number | null {
  if (entry === undefined) return null;
  if (/^\d{1,15}$/.test(entry)) return Number(entry);
  throw wrongUsage(`found --entry ${entry}; allowed an entry's number, from 0`);
}

function secondsOf(every: string | undefined, once: boolean): number {
  if (every !== undefined && once) {
    throw wrongUsage("found --every with --once or --entry; allowed is one of them");
  }
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
