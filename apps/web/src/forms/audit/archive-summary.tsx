import type { AuditTrailSummary } from "@weighhouse/desk/summarise-audit-trail";
import { formatCount } from "@weighhouse/figures/numbers";
import { ButtonLink } from "@/look/button";
import { Notice } from "@/look/notice";
import { Time } from "@/look/time";

/** What the archive will hold, and the link that makes it. */
export function ArchiveSummary(props: { campaign: string; summary: AuditTrailSummary }) {
  const { campaign, summary } = props;
  return (
    <>
      <p className="mb-3">
        One ZIP file from which everything on these pages can be recomputed without this server: the
        ledger’s {formatCount(summary.size)} entries with their payloads,{" "}
        {formatCount(summary.heads)} signed heads, the campaign document with{" "}
        {formatCount(summary.hypotheses)} hypotheses and {formatCount(summary.measurements)}{" "}
        measurements, the standings by engine {summary.engine} and what they hang on, tables as CSV
        and for LaTeX, figures as SVG, the counts for a methods section, and a README that says how
        to check it by hand; <code>check.py</code> checks it without this software.
      </p>
      {summary.clock === "simulated" ? (
        <Notice label="Simulated clock.">The archive says so, and so does its check.</Notice>
      ) : null}
      <dl className="mb-3 grid gap-x-5 gap-y-0.5 text-[14px] sm:grid-cols-[auto_1fr]">
        <dt className="text-quiet">as of</dt>
        <dd>
          entry {summary.size - 1}, <Time at={summary.head.at} />
        </dd>
        <dt className="text-quiet">tree head</dt>
        <dd>
          <code>{summary.head.root}</code>
        </dd>
        {summary.keys.map(({ fingerprint, verifierKey }) => (
          <div key={fingerprint} className="contents">
            <dt className="text-quiet">signed by</dt>
            <dd>
              <code title={verifierKey}>{fingerprint}</code>
            </dd>
          </div>
        ))}
      </dl>
      <details className="mb-3">
        <summary className="cursor-pointer text-[14.5px]">Files in it</summary>
        <ul className="mt-1 list-none text-[14px] sm:columns-2">
          {summary.files.map((file) => (
            <li key={file}>
              <code>{file}</code>
            </li>
          ))}
          <li className="text-quiet">
            and heads, keys and each quantity’s figure as files of their own
          </li>
        </ul>
      </details>
      <ButtonLink
        kind="main"
        href={`/api/v1/campaigns/${campaign}/audit.zip`}
        prefetch={false}
        download={summary.name}
      >
        Make and download the archive
      </ButtonLink>
      <p className="mt-2 text-[13.5px] text-quiet">
        The same head and engine give the same bytes. Check it below, or with{" "}
        <code>npx weighhouse verify {summary.name}</code>.
      </p>
      <details className="mt-3">
        <summary className="cursor-pointer text-[14.5px]">The newest signed head, to keep</summary>
        <p className="my-2 text-[13.5px] text-quiet">
          Whoever keeps this note can prove that nothing before it was changed.
        </p>
        <pre className="overflow-x-auto rounded-sheet bg-well p-3 text-[12.5px]">
          {summary.head.note}
        </pre>
      </details>
    </>
  );
}
