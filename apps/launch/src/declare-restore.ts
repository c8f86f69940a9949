import { declareRestored } from "@weighhouse/store/declare-restored";
import { KeptHeads } from "@weighhouse/store/kept-heads";
import { openKeys } from "@weighhouse/store/keys";
import type { Settings } from "@weighhouse/store/settings";
import { say } from "./say";
import { withDatabase } from "./with-database";

/** Puts on record that the database was restored; then everything starts again. */
export async function declareRestore(settings: Settings, words: string[]): Promise<number> {
  const [reason = "", ...more] = words;
  if (reason.trim() === "" || more.length > 0) {
    say(`found ${words.length} words; allowed is one, the reason: declare-restore "a disk failed"`);
    return 2;
  }
  return withDatabase(settings, async ({ url, keys, origin }) => {
    const signer = await openKeys({ folder: keys, name: new URL(origin).hostname, make: false });
    const keptHeads = new KeptHeads(keys);
    const declared = await declareRestored({ url, signer, keptHeads, reason: reason.trim() });
    for (const { campaign, kept, size } of declared) {
      say(
        campaign === null
          ? `the ledger ${kept.origin} is in the database no more; its last head is put aside`
          : `${campaign}: declared as entry ${size}; the last head kept was of ${kept.size} entries`,
      );
    }
    if (declared.length > 0) return 0;
    say("found nothing to declare: the database goes on from the last heads");
    return 1;
  });
}
