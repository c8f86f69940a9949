import type { VerdictRow } from "@weighhouse/campaign/standings";

type VerdictWord = VerdictRow["verdict"];

/*
 * Small beams on a fulcrum: level for pass, tipped with its pan struck off for fail, two faint
 * positions for undecided, an empty beam while waiting. Shape alone tells them apart.
 */
const drawings: Record<VerdictWord, React.ReactNode> = {
  pass: <path d="M1 4.5h14M8 4.5V11M5 11h6M2.5 4.5v3M13.5 4.5v3" />,
  fail: <path d="M2 1.8l12 6.4M8 5V11M5 11h6M14 8.2v2.8" />,
  undecided: <path d="M1.5 6.5l13-3.5M1.5 3l13 3.5M8 5V11M5 11h6" strokeDasharray="2 1.6" />,
  awaiting: <path d="M1 4.5h14M8 4.5V11M5 11h6" strokeDasharray="1.5 2" />,
  notMeasured: <path d="M5 11h6M8 11V7" />,
  withheld: <path d="M2 3h12v8H2zM2 3l6 4 6-4" />,
  void: <path d="M2 6h12" strokeDasharray="1.5 2" />,
};

const inks: Record<VerdictWord, string> = {
  pass: "text-fir",
  fail: "text-rust",
  undecided: "text-ink",
  awaiting: "text-quiet",
  notMeasured: "text-quiet",
  withheld: "text-quiet",
  void: "text-quiet",
};

export function VerdictMark({ verdict }: { verdict: VerdictWord }) {
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
      {drawings[verdict]}
    </svg>
  );
}

export function verdictInk(verdict: VerdictWord): string {
  return inks[verdict];
}
