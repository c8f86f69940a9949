"use client";

import { useMemo, useSyncExternalStore } from "react";
import { checkEntry } from "@weighhouse/ledger/check-entry";
import type { EntryEvidence } from "@weighhouse/ledger/check-entry";

const never = () => () => {};

/** Checks the entry here, in the reader's browser, trusting nothing that the server says of it. */
export function EntryCheck({ evidence }: { evidence: EntryEvidence }) {
  const inBrowser = useSyncExternalStore(
    never,
    () => true,
    () => false,
  );
  const lines = useMemo(() => (inBrowser ? checkEntry(evidence) : null), [inBrowser, evidence]);
  if (lines === null) {
    return <p className="text-quiet">The check runs in your browser and needs scripts for it.</p>;
  }
  const ok = lines.every((line) => line.ok);
  return (
    <div data-entry-check={ok ? "ok" : "failed"}>
      <p className="mb-2">
        {ok
          ? "Checked in this browser: the entry stands in the signed ledger as shown."
          : "Checked in this browser: something does not hold."}
      </p>
      <ul className="list-none">
        {lines.map((line) => (
          <li key={line.check} className="mb-1.5 grid grid-cols-[5.5ch_1fr] gap-x-2">
            <strong className={`font-semibold ${line.ok ? "text-fir" : "text-rust"}`}>
              {line.ok ? "ok" : "failed"}
            </strong>
            <span className="min-w-0">
              {line.check}
              <code className="block text-quiet">{line.detail}</code>
            </span>
          </li>
        ))}
      </ul>
    </div>
  );
}
