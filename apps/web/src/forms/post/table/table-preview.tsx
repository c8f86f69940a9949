"use client";

import type { CampaignDocument } from "@weighhouse/campaign/document";
import { formatCount } from "@weighhouse/figures/numbers";
import { ChangesView } from "../changes-view";
import { countWords } from "../fates";
import type { PreviewedTable } from "./protocol";
import { TableProblems } from "./table-facts";

/** What posting would do, before it is done: how many of each fate, and what would turn. */
export function TablePreview(props: { document: CampaignDocument; previewed: PreviewedTable }) {
  const { document, previewed } = props;
  return (
    <section aria-label="Preview" className="mt-5 border-t border-rule pt-4">
      <h3 className="mb-2">
        Preview <span className="gloss">nothing is entered yet</span>
      </h3>
      <output className="mb-2 block">
        {countWords(previewed.counts)}. {verdictWords(previewed)}
      </output>
      <TableProblems problems={previewed.problems} />
      <ChangesView document={document} preview={previewed} />
    </section>
  );
}

function verdictWords({ counts, leftOut, postable, problems }: PreviewedTable): string {
  if (postable && leftOut > 0) {
    return `${formatCount(leftOut)} at fault ${leftOut === 1 ? "is" : "are"} left out; all others can be entered.`;
  }
  if (postable) return "All can be entered.";
  if (counts.refused + counts.conflict > 0) {
    return "Nothing is entered until every row can be: change how the columns are read, or mend the rows in the file and bring it in again.";
  }
  return counts.new === 0 && problems.length === 0 ? "There is nothing new to enter." : "";
}
