import { checkEntry } from "@weighhouse/ledger/check-entry";
import type { EntryEvidence } from "@weighhouse/ledger/check-entry";
import { parseTreeHead } from "@weighhouse/ledger/tree-head";
import { compareHeads } from "./compare-heads";
import { Refusal } from "./refusal";
import { ask, campaignAddress } from "./server";
import type { WatchedHead } from "./watched-heads";

/**
 * Proves one entry up to a signed head which goes on from the one that is kept.
 *
 * @returns a line for each thing that was recomputed
 * @throws {Refusal} 1 where one doesn't hold
 */
export async function proveEntry(
  campaign: string,
  seq: number,
  kept: WatchedHead,
): Promise<string[]> {
  const address = campaignAddress(campaign, `ledger/entries/${seq}`);
  const body = await ask(address, { accept: "application/json" });
  let lines: ReturnType<typeof checkEntry>;
  let head: WatchedHead;
  try {
    const evidence = JSON.parse(new TextDecoder().decode(body)) as EntryEvidence;
    if (evidence.entry.seq !== seq) throw new TypeError(`the entry ${evidence.entry.seq}`);
    lines = checkEntry(evidence);
    head = { note: evidence.head.note, head: parseTreeHead(evidence.head.note) };
  } catch (cause) {
    throw new Refusal(3, [`${address.href} answered with something that is no entry's proof`], {
      cause,
    });
  }
  const fault = await compareHeads(campaign, kept, head);
  const check = "the signed head goes on from the one kept";
  const detail = fault ?? `${kept.head.size} entries of ${head.head.size}`;
  const said = [...lines, { check, ok: fault === null, detail }].map(
    (line) => `${line.ok ? "ok" : "failed"}  ${line.check}: ${line.detail}`,
  );
  if (fault !== null || lines.some(({ ok }) => !ok)) {
    throw new Refusal(1, [`${campaign}: entry ${seq} is not proved`, ...said]);
  }
  return [`${campaign}: entry ${seq} is proved`, ...said];
}
