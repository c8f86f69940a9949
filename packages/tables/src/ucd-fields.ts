/** What a column's UCD says that it holds. */
export type UcdField =
  | { kind: "field"; field: string }
  | { kind: "error"; of: string }
  | { kind: "value"; word: string };

const FIELDS: Record<string, string> = {
  "time.epoch": "observedAt",
  "instr.tel": "facility",
  "instr.obsty": "facility",
  "meta.bib": "source",
  "meta.bib.bibcode": "source",
  "meta.ref": "source",
  "meta.ref.uri": "source",
  "meta.ref.url": "source",
  "phot.count": "count",
};
/** First atoms of words for what is measured; positions, times and such are told apart by name. */
const MEASURED = new Set(["phot", "phys", "spect"]);

/**
 * Reads an IVOA UCD1+: words parted by semicolons, the first the main one; upper and lower case
 * make no difference.
 *
 * Source: UCD1+ controlled vocabulary (IVOA, version 1.5).
 */
export function ucdField(ucd: string | null): UcdField | null {
  const [main = "", ...others] = (ucd ?? "")
    .toLowerCase()
    .split(";")
    .map((word) => word.trim().replace(/^[a-z]+:/, ""));
  if (main === "stat.error") return { kind: "error", of: others[0] ?? "" };
  if (others.some((word) => word.startsWith("stat.") || word.startsWith("meta.code"))) return null;
  if (main === "meta.id" && others.includes("meta.main")) return { kind: "field", field: "id" };
  const field = Object.hasOwn(FIELDS, main) ? FIELDS[main] : undefined;
  if (field !== undefined) return { kind: "field", field };
  return MEASURED.has(main.split(".")[0]!) ? { kind: "value", word: main } : null;
}
