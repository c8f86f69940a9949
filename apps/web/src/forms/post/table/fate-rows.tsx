"use client";

import type { CampaignDocument } from "@weighhouse/campaign/document";
import { formatCount } from "@weighhouse/figures/numbers";
import { useState, type RefObject } from "react";
import { Button } from "@/look/button";
import type { RowCounts, Show } from "./protocol";
import { RowWindow } from "./row-window";
import type { TableWorker } from "./table-worker";

const shows: { show: Show; words: string }[] = [
  { show: "all", words: "All" },
  { show: "new", words: "New" },
  { show: "alreadyThere", words: "Already there" },
  { show: "conflict", words: "In conflict" },
  { show: "refused", words: "Refused" },
];

/** Every row and what becomes of it, or those of one fate; faults can be gone through one by one. */
export function FateRows(props: {
  document: CampaignDocument;
  counts: RowCounts;
  worker: RefObject<TableWorker | null>;
  version: number;
}) {
  const { document, counts, worker, version } = props;
  const [chosen, setChosen] = useState<Show>("all");
  const [gone, setGone] = useState<{ to: number; version: number } | null>(null);
  // Rows that have changed are not scrolled to where a fault was before.
  const target = gone?.version === version ? gone.to : null;
  // Where nothing has the fate that was looked at any more, all rows are looked at again.
  const show = countOf(counts, chosen) === 0 ? "all" : chosen;
  const jump = async () => {
    const found = await worker.current?.call("nextFault", { show, after: target ?? -1 });
    if (found !== undefined && found !== null) setGone({ to: found, version });
  };
  return (
    <section aria-label="Rows" className="mt-5 border-t border-rule pt-4">
      <div className="sticky top-0 z-10 flex flex-wrap items-center gap-x-4 gap-y-1.5 bg-sheet py-1.5">
        <h3>Rows</h3>
        <fieldset className="flex min-w-0 flex-wrap gap-x-3.5">
          <legend className="sr-only">Show rows</legend>
          {shows
            .map((each) => ({ ...each, count: countOf(counts, each.show) }))
            .filter((each) => each.show === "all" || each.count > 0)
            .map((each) => (
              <button
                key={each.show}
                type="button"
                aria-pressed={show === each.show}
                className="cursor-pointer border-b-3 border-transparent text-[14.5px] text-quiet hover:text-ink aria-pressed:border-brass aria-pressed:text-ink"
                onClick={() => {
                  setChosen(each.show);
                  setGone(null);
                }}
              >
                {each.words} {formatCount(each.count)}
              </button>
            ))}
        </fieldset>
        {counts.refused + counts.conflict > 0 ? (
          <Button className="min-h-7! py-0.5! text-[14px]" onClick={() => void jump()}>
            Next fault
          </Button>
        ) : null}
      </div>
      <RowWindow
        // Other rows, or rows of which more is known: what was fetched is of no use any more.
        key={`${show} ${version}`}
        document={document}
        show={show}
        count={countOf(counts, show)}
        worker={worker}
        target={target}
      />
    </section>
  );
}

function countOf(counts: RowCounts, show: Show): number {
  if (show !== "all") return counts[show];
  return Object.values(counts).reduce((sum, count) => sum + count, 0);
}
