"use client";

import type { CampaignDocument } from "@weighhouse/campaign/document";
import { line } from "@weighhouse/campaign/fields";
import type { CorrectionsPreview } from "@weighhouse/desk/correct-measurements";
import { formatCount } from "@weighhouse/figures/numbers";
import { useRouter } from "next/navigation";
import { useState } from "react";
import { Button } from "@/look/button";
import { Field } from "@/look/field";
import { Notice } from "@/look/notice";
import { useTRPCClient } from "@/trpc/client";
import { refusalOf } from "../../refusal";
import { ChangesView } from "../changes-view";

const mostAtOnce = 10_000;

/**
 * Rows that say something else than what is on record under their id, entered as corrections for a
 * stated reason. What the table has no column for stays as it is.
 */
export function CorrectConflicts(props: {
  document: CampaignDocument;
  count: number;
  /** The rows in conflict, as they would be. */
  drafts: () => Promise<Record<string, unknown>[]>;
  onCorrected: () => void;
}) {
  const { document, count } = props;
  const client = useTRPCClient();
  const router = useRouter();
  const [reason, setReason] = useState("");
  const [seen, setSeen] = useState<CorrectionsPreview | null>(null);
  const [busy, setBusy] = useState(false);
  const [fault, setFault] = useState<{ reason?: string; all?: string }>({});
  const rows = `${formatCount(count)} ${count === 1 ? "row differs" : "rows differ"}`;

  const run = async (act: (corrections: Corrections) => Promise<void>) => {
    const said = line.safeParse(reason.trim());
    if (!said.success) {
      setFault({ reason: "Empty; allowed is a line that says why they were wrong." });
      return;
    }
    setBusy(true);
    setFault({});
    try {
      const drafts = await props.drafts();
      await act({
        key: document.campaign.key,
        leftOut: "kept",
        corrections: drafts.map((measurement) => ({ measurement, reason: said.data })),
      });
    } catch (error) {
      setFault({ all: refusalOf(error).message });
    } finally {
      setBusy(false);
    }
  };
  const look = () =>
    run(async (corrections) =>
      setSeen(await client.measurements.previewCorrections.mutate(corrections)),
    );
  const correct = () =>
    run(async (corrections) => {
      await client.measurements.correctMany.mutate(corrections);
      setSeen(null);
      setReason("");
      router.refresh();
      props.onCorrected();
    });
  if (count > mostAtOnce) {
    return (
      <Notice label={`${rows} from what is on record.`}>
        {formatCount(mostAtOnce)} at most are corrected at once; split the table.
      </Notice>
    );
  }
  return (
    <section aria-label="Corrections" className="mt-5 border-t border-rule pt-4">
      <h3 className="mb-1">
        Or as corrections <span className="gloss">{rows} from what is on record</span>
      </h3>
      <p className="mb-3 max-w-[70ch] text-quiet">
        The old contents stay in the ledger, beside the reason. What the table has no column for
        stays as it is.
      </p>
      <Field
        label="Reason"
        help="Why they were wrong: a new reduction, a wrong unit, a slip."
        autoComplete="off"
        value={reason}
        error={fault.reason}
        onKeyDown={(event) => {
          if (event.key !== "Enter") return;
          // It would preview the whole table again.
          event.preventDefault();
          void look();
        }}
        onChange={(event) => {
          setReason(event.target.value);
          setSeen(null);
        }}
      />
      {fault.all === undefined ? null : (
        <Notice role="alert" tone="bad" label="Refused.">
          {fault.all}
        </Notice>
      )}
      <Button kind="plain" disabled={busy} onClick={() => void look()}>
        See what correcting them changes
      </Button>
      {seen === null ? null : (
        <div className="mt-3">
          <ChangedFields seen={seen} />
          <ChangesView document={document} preview={seen} />
          <div className="mt-3">
            <Button kind="main" disabled={busy} onClick={() => void correct()}>
              Correct {formatCount(count)} {count === 1 ? "measurement" : "measurements"}
            </Button>
          </div>
        </div>
      )}
    </section>
  );
}

type Corrections = {
  key: string;
  leftOut: "kept";
  corrections: { measurement: Record<string, unknown>; reason: string }[];
};

const shown = 20;

function ChangedFields({ seen }: { seen: CorrectionsPreview }) {
  const changed = seen.corrections.filter(({ fields }) => fields.length > 0);
  return (
    <ul className="list-none [overflow-wrap:anywhere]">
      {changed.slice(0, shown).map(({ id, fields }) => (
        <li key={id} className="mb-1">
          <span className="font-medium">{id}</span>:{" "}
          {fields
            .map(({ field, before, after }) => `${field} ${words(before)} → ${words(after)}`)
            .join("; ")}
        </li>
      ))}
      {changed.length > shown ? <li>and {formatCount(changed.length - shown)} more.</li> : null}
    </ul>
  );
}

function words(value: unknown): string {
  if (value === null) return "none";
  return typeof value === "string" ? value : JSON.stringify(value);
}
