"use client";

import { formatCount } from "@weighhouse/figures/numbers";
import Link from "next/link";
import { Notice } from "@/look/notice";
import type { Refusal } from "../refusal";
import { FailureNote } from "../form-frame";
import { problemWords } from "../form-schema";

/** What was entered, and where in the ledger. */
export interface Entered {
  posted: number;
  alreadyThere: number;
  entries: { from: number; to: number } | null;
  /** Rows at fault that were left out, as was asked for. */
  leftOut: number;
}

/** What came of posting. */
export function PostedNote({ campaign, entered }: { campaign: string; entered: Entered | null }) {
  return (
    <output className="block">
      {entered === null ? null : (
        <Notice tone="good" label="Entered.">
          {entered.posted === 1
            ? "1 measurement is on record"
            : `${formatCount(entered.posted)} measurements are on record`}
          {entered.entries === null ? null : (
            <>
              {" "}
              as{" "}
              <Link className="link" href={`/campaigns/${campaign}/ledger/${entered.entries.from}`}>
                {entriesWords(entered.entries)}
              </Link>
            </>
          )}
          {entered.alreadyThere > 0
            ? `; ${formatCount(entered.alreadyThere)} ${entered.alreadyThere === 1 ? "was" : "were"} there already`
            : ""}
          .
          {entered.leftOut > 0
            ? ` ${formatCount(entered.leftOut)} ${entered.leftOut === 1 ? "row" : "rows"} at fault ${entered.leftOut === 1 ? "was" : "were"} left out, as you chose.`
            : ""}{" "}
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
