"use client";

import { formatCount } from "@weighhouse/figures/numbers";
import Link from "next/link";
import { Notice } from "@/look/notice";
import type { Refusal } from "../refusal";
import type { Posted } from "./use-posting";
import { FailureNote } from "../form-frame";
import { problemWords } from "../form-schema";

/** What came of posting. */
export function PostedNote({ campaign, posted }: { campaign: string; posted: Posted | null }) {
  return (
    <output className="block">
      {posted === null ? null : (
        <Notice tone="good" label="Entered.">
          {posted.posted.length === 1
            ? "1 measurement is on record"
            : `${formatCount(posted.posted.length)} measurements are on record`}
          {posted.appended === null ? "" : ` as ${entriesWords(posted.appended)}`}
          {posted.alreadyThere.length > 0
            ? `; ${formatCount(posted.alreadyThere.length)} were there already`
            : ""}
          .{" "}
          <Link className="link" href={`/campaigns/${campaign}`}>
            See the standings
          </Link>
        </Notice>
      )}
    </output>
  );
}

/** "ledger entry 6", or "ledger entries 6 to 8", of the entries [from, to). */
function entriesWords({ from, to }: { from: number; to: number }): string {
  return to - from === 1 ? `ledger entry ${from}` : `ledger entries ${from} to ${to - 1}`;
}

/** A refusal of the whole, with every row at fault. */
export function PostingRefused({ refusal }: { refusal: Refusal | null }) {
  if (refusal === null) return null;
  return (
    <FailureNote
      failure={{
        message: refusal.message,
        signedOut: refusal.signedOut,
        loose: refusal.problems.map((problem) => `${problem.pointer}: ${problemWords(problem)}`),
      }}
    />
  );
}
