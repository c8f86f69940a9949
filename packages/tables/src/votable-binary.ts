import { MAX_CELL, MAX_CHARACTERS } from "./limits";
import { infinity, integerCell } from "./number-text";
import type { RawCell, RawRow } from "./raw-table";
import type { RowProblem, TableProblem } from "./table";
import { addProblem, rowRefusal } from "./row-limit";
import { allowedCell, isNull } from "./votable-cells";
import { datatypes, type VoDatatype, type VoField } from "./votable-fields";

/**
 * Reads the rows of BINARY or BINARY2 (VOTable 1.4, sections 5.3 and 5.4): values one after another,
 * big-endian, in BINARY2 behind a bit per field that says whether its value is missing.
 */
export function readBinary(
  bytes: Uint8Array<ArrayBuffer>,
  fields: readonly VoField[],
  options: { masked: boolean; problems: TableProblem[] },
): RawRow[] {
  const reader = new BinaryReader(bytes, options.problems);
  const flagBytes = options.masked ? Math.ceil(fields.length / 8) : 0;
  const rows: RawRow[] = [];
  while (!reader.atEnd && !reader.isLost) {
    reader.row = rows.length + 1;
    const refusal = rowRefusal(rows.length, fields.length);
    if (refusal !== null) reader.lose(null, refusal.found, refusal.allowed);
    if (reader.isLost) return rows;
    const from = reader.at;
    const flags = reader.take(flagBytes, null);
    const cells: RawCell[] = [];
    const problems: RowProblem[] = [];
    for (const [index, field] of fields.entries()) {
      const cell = reader.cell(field);
      if (reader.isLost) return rows;
      const missing = flags !== null && ((flags[index >> 3] ?? 0) & (0x80 >> (index & 7))) !== 0;
      cells.push(missing ? null : reader.checked(field, cell, problems));
    }
    if (reader.at === from) reader.lose(null, "rows of no bytes", "fields that hold something");
    const { row: line } = reader;
    rows.push(problems.length === 0 ? { line, cells } : { line, cells, problems });
  }
  return rows;
}

const BIT_COUNT = 8;
const UTF8 = new TextDecoder("utf-8", { fatal: true, ignoreBOM: true });
const UTF16 = new TextDecoder("utf-16be", { fatal: true, ignoreBOM: true });

class BinaryReader {
  readonly #bytes: Uint8Array<ArrayBuffer>;
  readonly #view: DataView;
  readonly #lost: TableProblem[];
  at = 0;
  row = 0;
  /** Of arrays, which as text are up to eight times the data. */
  #letters = 0;
  /** Where the next value begins isn't known any more. */
  isLost = false;

  constructor(bytes: Uint8Array<ArrayBuffer>, lost: TableProblem[]) {
    this.#bytes = bytes;
    this.#view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
    this.#lost = lost;
  }

  get atEnd(): boolean {
    return this.at >= this.#bytes.length;
  }

  lose(column: string | null, found: string, allowed: string): void {
    this.isLost = true;
    this.#lost.push({ line: this.row, column, found, allowed });
  }

  take(length: number, column: string | null): Uint8Array<ArrayBuffer> | null {
    const left = this.#bytes.length - this.at;
    if (length > left) {
      this.lose(column, `the data's end, ${left} bytes on`, `${length} bytes more`);
      return null;
    }
    this.at += length;
    return this.#bytes.subarray(this.at - length, this.at);
  }

  /** Undefined: not of the field's type. */
  cell(field: VoField): RawCell | undefined {
    const count = field.count ?? this.#count(field);
    if (count === null) return null;
    const isBits = field.datatype === "bit";
    const length = isBits ? Math.ceil(count / BIT_COUNT) : count * datatypes[field.datatype];
    const from = this.at;
    const taken = this.take(length, field.name);
    if (taken === null) return null;
    if (field.form === "text") return textOf(taken, field.datatype);
    if (field.form === "value") return this.#value(field.datatype, from);
    const text = isBits ? bitsOf(taken, count) : this.#values(field.datatype, from, count);
    this.#letters += text.length;
    if (this.#letters <= MAX_CHARACTERS) return text;
    const found = `arrays that are more than ${MAX_CHARACTERS} characters as text`;
    this.lose(field.name, found, "less; leave such columns out");
    return null;
  }

  /** A value that isn't of its type is a problem; one that is the field's null is missing. */
  checked(field: VoField, cell: RawCell | undefined, problems: RowProblem[]): RawCell {
    if (cell === undefined) {
      const found =
        field.form === "text" ? "bytes that aren't text" : "a byte that is no truth value";
      const allowed =
        field.form === "text" ? `${field.datatype} in UTF-8 or UTF-16` : allowedCell(field);
      addProblem(problems, { column: field.name, found, allowed });
      return null;
    }
    return Number.isNaN(cell) || cell === "" || isNull(field, cell) ? null : cell;
  }

  #count(field: VoField): number | null {
    const from = this.at;
    if (this.take(4, field.name) === null) return null;
    const count = this.#view.getInt32(from);
    if (count >= 0 && count <= MAX_CELL) return count;
    this.lose(field.name, `a cell of ${count} values`, `0 to ${MAX_CELL}`);
    return null;
  }

  #values(datatype: VoDatatype, from: number, count: number): string {
    const isComplex = datatype.endsWith("Complex");
    const part: VoDatatype =
      datatype === "floatComplex" ? "float" : datatype === "doubleComplex" ? "double" : datatype;
    const parts: string[] = [];
    for (let index = 0; index < (isComplex ? 2 * count : count); index += 1) {
      const value = this.#value(part, from + index * datatypes[part]);
      parts.push(
        value === null ? "?" : value === true ? "T" : value === false ? "F" : String(value),
      );
    }
    return parts.join(" ");
  }

  #value(datatype: VoDatatype, at: number): RawCell | undefined {
    switch (datatype) {
      case "boolean":
        return truthOf(this.#view.getUint8(at));
      case "bit":
        // Astropy sets another bit of the byte than the standard's first.
        return this.#view.getUint8(at) !== 0;
      case "unsignedByte":
        return this.#view.getUint8(at);
      case "short":
        return this.#view.getInt16(at);
      case "int":
        return this.#view.getInt32(at);
      case "long":
        return integerCell(this.#view.getBigInt64(at));
      case "float":
        return finite(shortest(this.#view.getFloat32(at)));
      default:
        return finite(this.#view.getFloat64(at));
    }
  }
}

function finite(value: number): number | string {
  return Math.abs(value) === Number.POSITIVE_INFINITY ? infinity(value < 0) : value;
}

/**
 * The double with the fewest digits that is nearest to a single-precision number and no other, so that
 * a file in BINARY2 says what the same file in TABLEDATA does: 0.1, not 0.10000000149011612.
 */
function shortest(single: number): number {
  if (single === 0 || !Number.isFinite(single)) return single;
  // Subnormal numbers have fewer digits than the six that all others hold.
  for (let digits = Math.abs(single) < 1.2e-38 ? 1 : 6; digits < 9; digits += 1) {
    const number = Number(single.toPrecision(digits));
    if (Math.fround(number) === single) return number;
  }
  return Number(single.toPrecision(9));
}

function truthOf(byte: number): boolean | null | undefined {
  const letter = String.fromCharCode(byte);
  if (/[Tt1]/.test(letter)) return true;
  if (/[Ff0]/.test(letter)) return false;
  return byte === 0 || /[? ]/.test(letter) ? null : undefined;
}

/** Up to the first NUL, which ends a text shorter than its field. */
function textOf(bytes: Uint8Array, datatype: VoDatatype): string | undefined {
  try {
    const text = (datatype === "char" ? UTF8 : UTF16).decode(bytes);
    const end = text.indexOf("\0");
    return end === -1 ? text : text.slice(0, end);
  } catch {
    // The decoder's only way to say that bytes aren't of its encoding.
    return undefined;
  }
}

const BITS = Array.from({ length: 256 }, (_, byte) => byte.toString(2).padStart(BIT_COUNT, "0"));

function bitsOf(bytes: Uint8Array, count: number): string {
  return Array.from(bytes, (byte) => BITS[byte])
    .join("")
    .slice(0, count);
}
