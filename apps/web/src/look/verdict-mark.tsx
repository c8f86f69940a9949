import type { VerdictWord } from "@weighhouse/campaign/standings";
import { VERDICT_MARKS } from "@weighhouse/figures/verdict-marks";

const inks: Record<VerdictWord, string> = {
  pass: "text-fir",
  fail: "text-rust",
  undecided: "text-ink",
  awaiting: "text-quiet",
  notMeasured: "text-quiet",
  withheld: "text-quiet",
  void: "text-quiet",
};

/** The verdict's small beam, as in the archive's figures: shape alone tells them apart. */
export function VerdictMark({ verdict }: { verdict: VerdictWord }) {
  const { path, dash } = VERDICT_MARKS[verdict];
  return (
    <svg
      viewBox="0 0 16 12"
      width="16"
      height="12"
      aria-hidden="true"
      className={`inline-block flex-none ${inks[verdict]}`}
      fill="none"
      stroke="currentColor"
      strokeWidth="1.4"
    >
      <path d={path} strokeDasharray={dash ?? undefined} />
    </svg>
  );
}

export function verdictInk(verdict: VerdictWord): string {
  return inks[verdict];
}
