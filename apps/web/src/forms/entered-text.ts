/**
 * What a person types into a field, as the value that the schemas read. Text that is no number or
 * time stays as it is, so that the schema refuses it at its field and names what was found.
 */

const plainNumber = /^[+-]?(\d+\.?\d*|\.\d+)([eE][+-]?\d+)?$/;

/** "1.75", "−0.4" (typographic minus) and "2e-3" as numbers; empty as null. */
export function numberFromText(text: string | null | undefined): number | string | null {
  const trimmed = (text ?? "").trim();
  if (trimmed === "") return null;
  const plain = trimmed.replace(/^[\u2212\u2013]/, "-").replace(/([eE])[\u2212\u2013]/, "$1-");
  return plainNumber.test(plain) ? Number(plain) : trimmed;
}

const dateOnly = /^\d{4}-\d{2}-\d{2}$/;
const dateAndTime = /^(\d{4}-\d{2}-\d{2})[ T](\d{2}:\d{2})(:\d{2}(?:\.\d{1,9})?)?\s*(?:Z|UTC)?$/i;

/** "2031-03-01", "2031-03-01 09:30" and "2031-03-01T09:30:00Z", all in UTC, as RFC 3339. */
export function timeFromText(text: string | null | undefined): string | null {
  const trimmed = (text ?? "").trim();
  if (trimmed === "") return null;
  if (dateOnly.test(trimmed)) return `${trimmed}T00:00:00Z`;
  const parts = dateAndTime.exec(trimmed);
  return parts === null ? trimmed : `${parts[1]}T${parts[2]}${parts[3] ?? ":00"}Z`;
}

/** A time of a document as people type it: `2031-03-01 09:30`, seconds only where there are any. */
export function timeToText(time: string | null | undefined): string {
  if (time === null || time === undefined) return "";
  return time
    .replace("T", " ")
    .replace(/Z$/, "")
    .replace(/(\.\d*?)0+$/, "$1")
    .replace(/\.$/, "")
    .replace(/^(.{16}):00$/, "$1");
}

/** Text without its outer spaces; empty as null. */
export function textOrNull(text: string | null | undefined): string | null {
  const trimmed = (text ?? "").trim();
  return trimmed === "" ? null : trimmed;
}

export function numberToText(value: number | string | null | undefined): string {
  return value === null || value === undefined ? "" : String(value);
}

/** A key such as `limb-in-may` from a title such as "Limb, in May". */
export function keyFromTitle(title: string): string {
  return title
    .normalize("NFKD")
    .replace(/[\u0300-\u036f]/g, "")
    .toLowerCase()
    .replace(/[^a-z0-9]+/g, "-")
    .slice(0, 64)
    .replace(/^-+|-+$/g, "");
}

/** The key for a title being typed: it follows the title until somebody gives one of their own. */
export function followingKey(key: string, titles: { before: string; now: string }): string {
  return key === keyFromTitle(titles.before) ? keyFromTitle(titles.now) : key;
}
