import type { VerdictWord } from "@weighhouse/campaign/standings";

/** What a reader sees for each verdict. */
export const VERDICT_WORDS: Record<VerdictWord, string> = {
  pass: "pass",
  fail: "fail",
  undecided: "undecided",
  awaiting: "awaiting",
  notMeasured: "not measured",
  withheld: "withheld",
  void: "void",
};

/**
 * Small beams on a fulcrum, 16 by 12 pixels: level for pass, tipped with its pan struck off for fail,
 * two faint positions for undecided, an empty beam while waiting. Shape alone tells them apart.
 */
export const VERDICT_MARKS: Record<VerdictWord, { path: string; dash: string | null }> = {
  pass: { path: "M1 4.5h14M8 4.5V11M5 11h6M2.5 4.5v3M13.5 4.5v3", dash: null },
  fail: { path: "M2 1.8l12 6.4M8 5V11M5 11h6M14 8.2v2.8", dash: null },
  undecided: { path: "M1.5 6.5l13-3.5M1.5 3l13 3.5M8 5V11M5 11h6", dash: "2 1.6" },
  awaiting: { path: "M1 4.5h14M8 4.5V11M5 11h6", dash: "1.5 2" },
  notMeasured: { path: "M5 11h6M8 11V7", dash: null },
  withheld: { path: "M2 3h12v8H2zM2 3l6 4 6-4", dash: null },
  void: { path: "M2 6h12", dash: "1.5 2" },
};
