import type { RawCell } from "./raw-table";

export type DecimalMark = "point" | "comma";

const NUMBERS: Record<DecimalMark, RegExp> = {
  point: /^[+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?$/,
  comma: /^[+-]?(?:\d+,?\d*|,\d+)(?:[eE][+-]?\d+)?$/,
};

/**
 * A number in ASCII digits, or with a typographic minus; nothing that two readers could read two
 * ways: no thousands parted, no hexadecimal, no infinity.
 */
export function readNumber(text: string, mark: DecimalMark): number | null {
  const ascii = text.replace(/^[\u2212\u2013]/, "-");
  if (!NUMBERS[mark].test(ascii)) return null;
  const number = Number(mark === "comma" ? ascii.replace(",", ".") : ascii);
  // Too small for a double isn't zero: it stays text, and is refused.
  if (number === 0 && /^[^eE]*[1-9]/.test(ascii)) return null;
  return Number.isFinite(number) ? number : null;
}

/** A cell as a number where it is one; else as it is, for whoever refuses it in its own words. */
export function numberCell(cell: RawCell, mark: DecimalMark): RawCell {
  if (typeof cell !== "string") return cell;
  return readNumber(cell, mark) ?? cell;
}

/** Exactly the decimal digits of a number's cell, for dates that a double would round. */
export function decimalText(cell: RawCell, mark: DecimalMark): string {
  const text = String(cell);
  return mark === "comma" && typeof cell === "string" ? text.replace(",", ".") : text;
}
