import type { EcsvColumn } from "./ecsv-header";
import { integerBounds, readFloat, readInteger } from "./number-text";
import type { RawCell, RawColumn } from "./raw-table";
import type { RowProblem } from "./table";

export type EcsvType = {
  kind: RawColumn["kind"];
  /** Undefined: not of the type. NaN is told apart from a missing cell. */
  read: (text: string) => RawCell | undefined;
  allowed: string;
  note: string | null;
};

const TRUTHS = new Map([
  ["True", true],
  ["true", true],
  ["1", true],
  ["False", false],
  ["false", false],
  ["0", false],
]);
const ALLOWED =
  "bool, int8 to int64, uint8 to uint64, float16 to float128 or string, one value in a cell";

/** How a column's cells are read, or why they can't be; arrays of a fixed shape are kept as text. */
export function ecsvType({ name, datatype, subtype }: EcsvColumn): EcsvType | RowProblem {
  if (subtype !== null) return subtypeOf(name, datatype, subtype);
  const integer = /^(u?)int(8|16|32|64)$/.exec(datatype);
  if (integer !== null) {
    const bounds = integerBounds(Number(integer[2]), integer[1] === "");
    return {
      kind: "number",
      read: (text) => readInteger(text, bounds),
      allowed: `an integer from ${bounds[0]} to ${bounds[1]}`,
      note: null,
    };
  }
  if (/^float(?:16|32|64|128)$/.test(datatype)) {
    return { kind: "number", read: readFloat, allowed: "a number", note: null };
  }
  if (datatype === "bool") {
    return {
      kind: "boolean",
      read: (text) => TRUTHS.get(text),
      allowed: "True or False",
      note: null,
    };
  }
  if (datatype === "string") return asText(null);
  if (/^complex(?:64|128|256)$/.test(datatype)) {
    return asText(`column ${name}: complex numbers, kept as text`);
  }
  return { column: name, found: `the datatype ${datatype}`, allowed: ALLOWED };
}

function subtypeOf(name: string, datatype: string, subtype: string): EcsvType | RowProblem {
  const shape = /^[a-z]+\d*\[([\d,null ]*)\]$/.exec(subtype);
  if (datatype !== "string" || shape === null) {
    return { column: name, found: `objects (subtype ${subtype})`, allowed: ALLOWED };
  }
  if (shape[1]?.includes("null") === true) {
    return {
      column: name,
      found: `arrays of changing length (subtype ${subtype})`,
      allowed: ALLOWED,
    };
  }
  return asText(`column ${name}: arrays (${subtype}), kept as text`);
}

function asText(note: string | null): EcsvType {
  return { kind: "text", read: (text) => text, allowed: "text", note };
}
