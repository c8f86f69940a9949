import { bounds, type VoField } from "./votable-fields";
import { readFloat, readInteger } from "./number-text";
import type { RawCell } from "./raw-table";

const TRUTHS: ReadonlyMap<string, boolean | null> = new Map([
  ...["t", "true", "1"].map((text) => [text, true] as const),
  ...["f", "false", "0"].map((text) => [text, false] as const),
  ["?", null],
]);

/**
 * A cell of TABLEDATA as its field's type: empty ones, the field's null value and NaN are missing.
 * White space around it is the file's layout. Undefined: not of the type.
 */
export function textCell(field: VoField, text: string): RawCell | undefined {
  const trimmed = text.trim();
  if (trimmed === "" || text === field.nullText) return null;
  if (field.form !== "value") return trimmed;
  const cell = valueOf(field, trimmed);
  return cell !== undefined && (Number.isNaN(cell) || isNull(field, cell)) ? null : cell;
}

/** What a field's VALUES declare as its null, compared as a value: `-99` and `-99.0` are one. */
export function isNull(field: VoField, cell: RawCell): boolean {
  if (field.nullText === null || cell === null) return false;
  if (field.form !== "value") return cell === field.nullText;
  return cell === valueOf(field, field.nullText.trim());
}

/** What a cell may hold, in words. */
export function allowedCell({ datatype }: VoField): string {
  if (datatype === "boolean") return "T, F, true, false, 1, 0 or ?";
  if (datatype === "bit") return "1 or 0";
  if (Object.hasOwn(bounds, datatype)) {
    const [least, most] = bounds[datatype as keyof typeof bounds];
    return `an integer from ${least} to ${most}`;
  }
  return "a number";
}

function valueOf({ datatype }: VoField, text: string): RawCell | undefined {
  switch (datatype) {
    case "boolean":
    case "bit":
      return TRUTHS.get(text.toLowerCase());
    case "unsignedByte":
    case "short":
    case "int":
    case "long":
      return readInteger(fromHexadecimal(text), bounds[datatype]);
    default:
      return readFloat(text);
  }
}

function fromHexadecimal(text: string): string {
  return /^0[xX][\da-fA-F]{1,16}$/.test(text) ? String(BigInt(text)) : text;
}
