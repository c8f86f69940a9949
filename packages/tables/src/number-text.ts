import type { RawCell } from "./raw-table";

const DECIMAL = /^[+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?$/;
const NOT_FINITE = /^([+-]?)(?:(nan)|inf(?:inity)?)$/i;
const INTEGER = /^[+-]?\d+$/;
/** 19 digits hold 64 bits; whatever is longer than that with its sign is out of range. */
const LONGEST_INTEGER = 20;

/**
 * A floating-point number as text: the nearest double; NaN; text where a double is infinite or would
 * be 0 without being so; undefined where it is no number.
 */
export function readFloat(text: string): number | string | undefined {
  if (DECIMAL.test(text)) {
    const number = Number(text);
    if (number === 0) return /^[^eE]*[1-9]/.test(text) ? text : number;
    return Number.isFinite(number) ? number : text;
  }
  const match = NOT_FINITE.exec(text);
  if (match === null) return undefined;
  return match[2] === undefined ? infinity(match[1] === "-") : Number.NaN;
}

/** What a column of numbers holds where it is infinite: text, so that no sum is ever made with it. */
export function infinity(negative: boolean): string {
  return negative ? "-inf" : "inf";
}

/** An integer within its type's bounds, else undefined. */
export function readInteger(text: string, bounds: readonly [bigint, bigint]): RawCell | undefined {
  if (!INTEGER.test(text) || text.replace(/^[+-]?0*/, "").length > LONGEST_INTEGER)
    return undefined;
  const integer = BigInt(text.replace(/^\+/, ""));
  return integer < bounds[0] || integer > bounds[1] ? undefined : integerCell(integer);
}

/** A number where a double holds it and its neighbours apart, else its digits. */
export function integerCell(integer: bigint): number | string {
  const number = Number(integer);
  return Number.isSafeInteger(number) ? number : String(integer);
}

/** Least and greatest of an integer type of so many bits. */
export function integerBounds(bits: number, signed: boolean): readonly [bigint, bigint] {
  const size = 1n << BigInt(bits);
  return signed ? [-size / 2n, size / 2n - 1n] : [0n, size - 1n];
}

/**
 * The sum of two doubles as decimal text, to 1e-17: a Julian Date in two parts loses nothing.
 *
 * @param a, b finite, |a|, |b| < 1e15
 */
export function decimalSum(a: number, b: number): string {
  const scaled = (x: number) => BigInt(x.toFixed(17).replace(".", ""));
  const sum = scaled(a) + scaled(b);
  const digits = String(sum < 0n ? -sum : sum).padStart(18, "0");
  const fraction = digits.slice(-17).replace(/0+$/, "");
  return `${sum < 0n ? "-" : ""}${digits.slice(0, -17)}${fraction === "" ? "" : `.${fraction}`}`;
}
