import type { Order, VerdictWord } from "@weighhouse/campaign/standings";
export { VERDICT_WORDS as verdictWords } from "@weighhouse/figures/verdict-marks";

export const verdictMeanings: Record<VerdictWord, string> = {
  pass: "The true value lies within the theory's error with the probability that the campaign's rule asks for.",
  fail: "The true value lies outside the theory's error with the probability that the campaign's rule asks for.",
  undecided: "The measurements so far decide neither way.",
  awaiting: "Nothing that counts has been measured yet.",
  notMeasured: "The quantity was closed without a measurement.",
  withheld: "Sealed, not yet revealed, and measured.",
  void: "What the prediction was conditional on did not happen.",
};

export const orderWords: Record<Order, string> = {
  "before-observation": "filed before observation",
  "before-posting": "filed before posting",
  after: "filed after data",
  undated: "undated",
};

export const orderMeanings: Record<Order, string> = {
  "before-observation":
    "Filed before the first measurement of this quantity was made: nobody could have known.",
  "before-posting":
    "Filed after the first measurement was made but before it was posted here: somebody could have seen it.",
  after: "Filed after data were posted, or after registration closed: listed, and not counted.",
  undated: "No time of filing was given: counted.",
};
