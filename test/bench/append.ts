/**
 * What an append costs as a ledger grows: one measurement posted, in its own transaction with its
 * entry, tree nodes, signed head, projections and scoring job. Against the same in a fresh ledger of
 * 100 entries in the same database, by turns. Run by `npm run bench`; other sizes as arguments: a
 * million entries grow in some ten minutes.
 */
import { appendEntries } from "@weighhouse/store/append";
import { openCampaign } from "@weighhouse/store/open-campaign";
import type { Store } from "@weighhouse/store/open-store";
import { postMeasurements } from "@weighhouse/store/post-measurements";
import { declarations, hum, opening, system } from "@weighhouse/store/testing/sample-campaign";
import { onBenchStore } from "./bench-store";
import { line } from "./timing";

const BASELINE = 100;
const ENTRIES_PER_TRANSACTION = 1000;
const SAMPLES = 300;

const given = process.argv.slice(2).map(Number);
const sizes = given.length > 0 ? given : [1e3, 1e4, 1e5];

/** A ledger that grows by postings of one measurement each. */
class Growing {
  size = 0;

  constructor(
    private readonly store: Store,
    private readonly campaign: string,
  ) {}

  async open(): Promise<this> {
    const { store, campaign } = this;
    await openCampaign(store, {
      coordinator: null,
      campaign: opening(campaign),
      entries: declarations,
    });
    this.size = declarations.length + 1;
    return this;
  }

  async growTo(size: number): Promise<void> {
    const { store, campaign } = this;
    while (this.size < size) {
      const count = Math.min(ENTRIES_PER_TRANSACTION, size - this.size);
      const entries = Array.from({ length: count }, (_, index) => ({
        kind: "measurements.posted" as const,
        payload: { measurements: [hum(`m-${this.size + index}`, 96)], correlations: [] },
      }));
      await appendEntries(store, { campaign, by: system, entries });
      this.size += count;
    }
  }

  /** Milliseconds that one posting takes. */
  async postOne(): Promise<number> {
    const { store, campaign } = this;
    const measurements = [hum(`m-${this.size}`, 96)];
    const start = performance.now();
    await postMeasurements(store, { campaign, by: system, measurements });
    this.size += 1;
    return performance.now() - start;
  }
}

function quantile(times: number[], part: number): number {
  return times.toSorted((a, b) => a - b)[Math.floor(part * times.length)]!;
}

await onBenchStore(async (store) => {
  const large = await new Growing(store, "large").open();
  console.log("\nOne measurement appended to a ledger of N entries, and to one of 100");
  console.log("        N   median (ms)  of 100 (ms)  ratio   95 % (ms)  of 100 (ms)  ratio");
  for (const size of sizes) {
    const small = await new Growing(store, `small-${size}`).open();
    await Promise.all([small.growTo(BASELINE), large.growTo(size)]);
    await store.sql`analyze`;
    const times: [number[], number[]] = [[], []];
    for (let index = 0; index < SAMPLES; index += 1) {
      times[0].push(await large.postOne());
      times[1].push(await small.postOne());
    }
    const [median, late] = [0.5, 0.95].map((part) => times.map((all) => quantile(all, part)));
    console.log(
      line([
        [size, 9],
        ...([median!, late!] as [number, number][]).flatMap(
          ([of, baseline], index): [string, number][] => [
            [of.toFixed(2), index === 0 ? 13 : 11],
            [baseline.toFixed(2), 12],
            [(of / baseline).toFixed(2), 6],
          ],
        ),
      ]),
    );
  }
});
