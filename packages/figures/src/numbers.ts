/** U+2212, the minus of print: as wide as the plus sign, never broken from its number. */
export const MINUS = "\u2212";
/** What stands where a number doesn't exist. */
export const ABSENT = "\u2013";
/** log10 of a Bayes factor whose likelihood is zero. */
export const MINUS_INFINITY = `${MINUS}\u221e`;

const NARROW_SPACE = "\u202f";
const NO_BREAK_SPACE = "\u00a0";
const SUPERSCRIPTS = ["⁰", "¹", "²", "³", "⁴", "⁵", "⁶", "⁷", "⁸", "⁹"];

/** A value and its standard uncertainty, both to be read times 10^exponent. */
export type RoundedQuantity = { value: string; uncertainty: string; exponent: number };

/**
 * Rounds an uncertainty to two significant digits and its value to the same decimal place.
 *
 * Rounds to nearest. Past six digits before the decimal point, or four zeros behind it, both are
 * written times a common power of ten.
 *
 * @param value finite
 * @param uncertainty standard uncertainty in the same unit, >= 0 and finite; 0 leaves the value as it is
 * Source: JCGM 100:2008 (GUM), 7.2.6, which asks for two significant digits at most and an estimate
 * rounded to be consistent with its uncertainty.
 */
export function roundToUncertainty(value: number, uncertainty: number): RoundedQuantity {
  if (!(uncertainty > 0) || !Number.isFinite(uncertainty)) {
    return { value: formatNumber(value), uncertainty: "0", exponent: 0 };
  }
  const sd = Number(uncertainty.toPrecision(2));
  const size = Math.max(Math.abs(value), sd);
  const sdPower = powerOf(sd);
  const decimals = 1 - sdPower;
  if ((size < 1e6 || decimals >= 0) && size < 1e15 && size >= 1e-4 && decimals <= 15) {
    return {
      value: signed(roundTo(value, decimals)),
      uncertainty: roundTo(sd, decimals),
      exponent: 0,
    };
  }
  const exponent = powerOf(Number(size.toPrecision(15)));
  const shifted = Math.min(100, Math.max(0, exponent - sdPower + 1));
  return {
    value: signed(scale(value, -exponent).toFixed(Math.min(shifted, 20))),
    uncertainty: scale(sd, -exponent).toFixed(Math.min(shifted, 20)),
    exponent,
  };
}

/** `8.10 ± 0.60`, or `(5.972 ± 0.060) × 10²⁴`; the value alone where there is no uncertainty. */
export function formatWithUncertainty(value: number, uncertainty: number | null): string {
  if (uncertainty === null || !(uncertainty > 0)) return formatNumber(value);
  const rounded = roundToUncertainty(value, uncertainty);
  const pair = `${rounded.value} ± ${rounded.uncertainty}`;
  return rounded.exponent === 0 ? pair : `(${pair}) ${timesTenTo(rounded.exponent)}`;
}

/**
 * A measured or combined value as its observable's scale has it: on log10 the value is natural and
 * its uncertainty in dex (a factor), so the value is rounded to what that factor leaves certain.
 */
export function formatMeasured(
  value: number,
  uncertainty: number | null,
  observable: { scale: string; unit?: string | null },
): string {
  const unit = observable.unit && observable.unit !== "1" ? NO_BREAK_SPACE + observable.unit : "";
  if (uncertainty === null || !(uncertainty > 0)) return formatNumber(value) + unit;
  if (observable.scale !== "log10") return formatWithUncertainty(value, uncertainty) + unit;
  const natural = roundToUncertainty(value, Math.abs(value) * Math.LN10 * uncertainty);
  const power = natural.exponent === 0 ? "" : ` ${timesTenTo(natural.exponent)}`;
  const dex = roundToUncertainty(0, uncertainty);
  const dexPower = dex.exponent === 0 ? "" : ` ${timesTenTo(dex.exponent)}`;
  return `${natural.value}${power}${unit} ± ${dex.uncertainty}${dexPower}${NO_BREAK_SPACE}dex`;
}

/**
 * A number on its own, to at most `significant` digits, without trailing zeros; in powers of ten
 * below 1e-4 and from 1e6 up (whole numbers from 1e15).
 */
export function formatNumber(value: number, significant = 6): string {
  if (!Number.isFinite(value)) return nonFinite(value);
  if (value === 0) return "0";
  const size = Math.abs(value);
  if (Number.isInteger(value) && size < 1e15) return signed(String(value));
  const rounded = Number(value.toPrecision(significant));
  if (Math.abs(rounded) >= 1e-4 && Math.abs(rounded) < 1e6) {
    return signed(String(rounded));
  }
  return inPowersOfTen(value, significant, true);
}

/** Fixed decimals with a true minus sign; a value that rounds to zero has no sign. */
export function formatFixed(value: number, decimals: number): string {
  if (!Number.isFinite(value)) return nonFinite(value);
  if (Math.abs(value) >= 1e15) return inPowersOfTen(value, decimals + 1, false);
  return signed(value.toFixed(decimals));
}

/** `3.1 × 10⁻⁷`: two significant digits and a power of ten. */
export function inPowersOfTen(value: number, significant = 2, trim = false): string {
  if (!Number.isFinite(value)) return nonFinite(value);
  if (value === 0) return "0";
  const [mantissa = "", exponent = "0"] = value.toExponential(significant - 1).split("e");
  const digits = trim ? String(Number(mantissa)) : mantissa;
  return `${signed(digits)} ${timesTenTo(Number(exponent))}`;
}

/** `× 10⁻⁷`, the thin part of a number in powers of ten. */
export function timesTenTo(exponent: number): string {
  return `×${NO_BREAK_SPACE}10${superscript(exponent)}`;
}

/** A whole number with groups of three parted by a narrow space (SI brochure, 5.4.4): `200 000`. */
export function formatCount(count: number): string {
  const digits = String(Math.abs(count));
  const grouped = digits.length > 4 ? digits.replace(/\B(?=(\d{3})+$)/g, NARROW_SPACE) : digits;
  return signed(count < 0 ? `-${grouped}` : grouped);
}

/** `5.2 to 11`, `≥ 5.2`, `≤ 11`; a null end is unbounded. */
export function formatInterval(lower: number | null, upper: number | null): string {
  if (lower === null && upper === null) return ABSENT;
  if (lower === null) return `≤${NO_BREAK_SPACE}${formatNumber(upper ?? 0, 4)}`;
  if (upper === null) return `≥${NO_BREAK_SPACE}${formatNumber(lower, 4)}`;
  if (lower === upper) return formatNumber(lower, 6);
  return `${formatNumber(lower, 4)} to ${formatNumber(upper, 4)}`;
}

/** `95 %`, to at most `significant` digits. */
export function formatPercent(fraction: number, significant = 3): string {
  return `${formatNumber(fraction * 100, significant)}${NO_BREAK_SPACE}%`;
}

/**
 * The parts before and from the decimal point, for columns that align on it: `−2.63` is
 * [`−2`, `.63`]. What follows a space (a power, an uncertainty) stays with the second.
 */
export function partAtDecimal(text: string): [string, string] {
  const at = text.search(/[. ]/);
  return at === -1 ? [text, ""] : [text.slice(0, at), text.slice(at)];
}

function superscript(exponent: number): string {
  const digits = [...String(Math.abs(exponent))].map((digit) => SUPERSCRIPTS[Number(digit)]);
  return (exponent < 0 ? "⁻" : "") + digits.join("");
}

function nonFinite(value: number): string {
  if (Number.isNaN(value)) return ABSENT;
  return value > 0 ? "∞" : MINUS_INFINITY;
}

/** Replaces the hyphen by a minus, and drops it from a zero. */
function signed(digits: string): string {
  if (!digits.startsWith("-")) return digits;
  const rest = digits.slice(1);
  return /[1-9]/.test(rest) ? MINUS + rest : rest;
}

function powerOf(value: number): number {
  return Number(value.toExponential().split("e")[1]);
}

function roundTo(value: number, decimals: number): string {
  if (decimals >= 0) return value.toFixed(decimals);
  const step = 10 ** -decimals;
  return String(Math.round(value / step) * step);
}

/** Shifts the decimal point in the text form: dividing by 10^n would leave 5.971999…. */
function scale(value: number, power: number): number {
  const [mantissa = "0", exponent = "0"] = value.toExponential().split("e");
  return Number(`${mantissa}e${Number(exponent) + power}`);
}
