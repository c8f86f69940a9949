import type { RawCell } from "./raw-table";

/** Which side of a number the true value is on; "none" for a value that is no limit. */
export type LimitSide = "below" | "above" | "fainter" | "brighter" | "none";

const WORDS: Record<string, LimitSide> = {
  "<": "below",
  "<=": "below",
  "≤": "below",
  upper: "below",
  "upper limit": "below",
  ul: "below",
  u: "below",
  ">": "above",
  ">=": "above",
  "≥": "above",
  lower: "above",
  "lower limit": "above",
  ll: "above",
  l: "above",
  fainter: "fainter",
  brighter: "brighter",
  "=": "none",
  "": "none",
  "-": "none",
  detection: "none",
  det: "none",
  none: "none",
  no: "none",
};

/** A limit flag's cell; null for a word that isn't one. */
export function limitSide(cell: RawCell): LimitSide | null {
  if (cell === null) return "none";
  const word = String(cell).trim().toLowerCase();
  return Object.hasOwn(WORDS, word) ? WORDS[word]! : null;
}

export function isLimitWord(cell: RawCell): boolean {
  return limitSide(cell) !== null;
}

/**
 * The document's word for a limit. On a magnitude scale the numbers run against brightness: a
 * number below the mark (`<`) is brighter than it; but an "upper limit" in words is on brightness,
 * so fainter. The flag's words are told apart by `isSign`.
 */
export function limitWord(
  side: Exclude<LimitSide, "none">,
  { isMagnitude, isSign }: { isMagnitude: boolean; isSign: boolean },
): "upper" | "lower" | "fainter" | "brighter" {
  if (side === "fainter" || side === "brighter") return side;
  if (!isMagnitude) return side === "below" ? "upper" : "lower";
  return (side === "below") === isSign ? "brighter" : "fainter";
}
