import type { RawCell } from "./raw-table";

const YES = /^(?:yes|y|true|t|1)$/i;
const NO = /^(?:no|n|false|f|0)$/i;
const STATUS: Record<string, string> = {
  final: "final",
  confirmed: "final",
  definitive: "final",
  published: "final",
  provisional: "provisional",
  prov: "provisional",
  preliminary: "provisional",
  prelim: "provisional",
  tentative: "provisional",
  draft: "provisional",
};

/** A cell that says yes or no; else as it is, for the schema to refuse. */
export function booleanCell(cell: RawCell): unknown {
  if (typeof cell === "boolean") return cell;
  const text = String(cell);
  return YES.test(text) ? true : NO.test(text) ? false : cell;
}

/** Final or provisional, by the words that tables have for them (common practice). */
export function statusCell(cell: RawCell): unknown {
  const text = String(cell).trim().toLowerCase();
  return Object.hasOwn(STATUS, text) ? STATUS[text] : cell;
}

/** A reason to set a measurement aside. A bare yes gives none, and is refused; a no is none. */
export function setAsideCell(cell: RawCell): unknown {
  const said = booleanCell(cell);
  if (said === false) return null;
  return said === true ? { reason: null } : { reason: String(cell) };
}

/** A source's link: what a column for DOIs or bibcodes leaves out is put before it. */
export function sourceCell(cell: RawCell, column: string): string {
  const text = String(cell);
  if (/doi/i.test(column) && /^10\.\d{4,}/.test(text)) return `doi:${text}`;
  if (/bibcode/i.test(column) && /^\d{4}\S{15}$/.test(text)) return `bibcode:${text}`;
  return text;
}

/** `zero-point:1; flux:0.5`; a coefficient of 1 may be left out. */
export function sharedCell(cell: RawCell, number: (text: string) => unknown): unknown {
  return String(cell)
    .split(";")
    .map((part) => part.trim())
    .filter((part) => part !== "")
    .map((part) => {
      const at = part.lastIndexOf(":");
      if (at === -1) return { error: part };
      return { error: part.slice(0, at).trim(), coefficient: number(part.slice(at + 1).trim()) };
    });
}

/** A cell that belongs to no field: a number or a truth where it reads back as the same text, else as it is. */
export function extraCell(cell: RawCell): RawCell {
  if (typeof cell !== "string" || cell === "") return cell;
  if (cell === "true" || cell === "false") return cell === "true";
  const number = Number(cell);
  return Number.isFinite(number) && String(number) === cell ? number : cell;
}
