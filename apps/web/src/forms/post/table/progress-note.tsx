import { formatCount } from "@weighhouse/figures/numbers";
import { Button } from "@/look/button";
import { sizeWords } from "../../audit/check-protocol";
import type { Progress } from "./protocol";
import type { Busy } from "./use-table";

/** What is under way, how far it is, and the way out of it. */
export function ProgressNote(props: {
  busy: Busy | null;
  progress: Progress | null;
  rows: number | null;
  onStop: () => void;
}) {
  const { busy, progress, rows, onStop } = props;
  const share = progress !== null && rows !== null && byRow.has(progress.stage) && rows > 0;
  return (
    <>
      <div className={busy === null ? "hidden" : "flex flex-wrap items-center gap-x-4 gap-y-2"}>
        <progress
          aria-label="Progress"
          className="h-2 w-44 accent-brass"
          {...(share ? { value: progress.done, max: rows } : {})}
        />
        <span>{busy === null ? "" : words(busy, progress, rows)}</span>
        <Button onClick={onStop}>Stop</Button>
      </div>
      <output className="sr-only">{busy === null ? "" : `${busyWords[busy]}…`}</output>
    </>
  );
}

const byRow = new Set<Progress["stage"]>(["read", "check", "enter"]);

const busyWords: Record<Busy, string> = {
  reading: "Reading the table",
  matching: "Reading the rows",
  previewing: "Previewing",
  posting: "Posting",
};

function words(busy: Busy, progress: Progress | null, rows: number | null): string {
  if (progress === null) return `${busyWords[busy]}…`;
  const of = rows === null ? "" : ` of ${formatCount(rows)}`;
  switch (progress.stage) {
    case "file":
      return `Loading ${sizeWords(progress.total ?? 0)}…`;
    case "reading":
      return `Reading ${sizeWords(progress.done)}…`;
    case "rows":
      return `Reading ${formatCount(progress.done)} rows…`;
    case "sending":
      return `Sending ${sizeWords(progress.done)}…`;
    case "read":
      return `${formatCount(progress.done)}${of} rows received`;
    case "check":
      return `${formatCount(progress.done)}${of} rows checked`;
    case "enter":
      return `${formatCount(progress.done)}${of} rows entered`;
  }
}
