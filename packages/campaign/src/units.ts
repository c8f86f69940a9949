import type { ConstantNode, MathNode, OperatorNode, ParenthesisNode, SymbolNode } from "mathjs";
import type { Measurement, Observable } from "./document";
import { parseText } from "./expression-parser";
import { bases, definitionOf } from "./unit-table";
import type { Dimension } from "./unit-table";

/** A unit in the bases: value x factor + offset. */
export type Unit = { factor: number; offset: number; dimension: Dimension };

/**
 * From one unit to another: `value x factor + offset` for a value, `x factor` for an uncertainty.
 * `unknown`: one of the two is a label that no conversion is known for.
 */
export type Conversion =
  | { kind: "factor"; factor: number; offset: number }
  | { kind: "other-dimension" }
  | { kind: "unknown" };

const SAME: Conversion = { kind: "factor", factor: 1, offset: 0 };
const cache = new Map<string, Unit | null>();
const CACHED = 1000;

/**
 * The conversion between two units. Equal texts need none, known or not.
 *
 * Accuracy: a few units in the last place. Reference values: see test/reference/README.md.
 */
export function conversion(from: string, to: string): Conversion {
  if (from === to) return SAME;
  const [source, target] = [unitOf(from), unitOf(to)];
  if (source === null || target === null) return { kind: "unknown" };
  if (bases.some((base) => (source.dimension[base] ?? 0) !== (target.dimension[base] ?? 0))) {
    return { kind: "other-dimension" };
  }
  const factor = source.factor / target.factor;
  return { kind: "factor", factor, offset: (source.offset - target.offset) / target.factor };
}

/**
 * A unit from its text: a symbol (`kg`, `mas`, `%`), or products, quotients and powers of symbols
 * (`kg m^2 / s^2`, `erg/(s cm^2)`).
 *
 * @returns null for a text that isn't one: an opaque label
 */
export function unitOf(text: string): Unit | null {
  const known = cache.get(text);
  if (known !== undefined) return known;
  const unit = definitionOf(text) ?? label(compoundOf(text));
  // Texts come from outside: the cache must not grow with them.
  if (cache.size >= CACHED) cache.clear();
  cache.set(text, unit);
  return unit;
}

/** A magnitude (or dex) for each area is no quotient: four times the area isn't a fourth of it. */
function label(unit: Unit | null): Unit | null {
  const { mag = 0, dex = 0, rad = 0 } = unit?.dimension ?? {};
  return (mag !== 0 || dex !== 0) && rad === -2 ? null : unit;
}

const COMPOUND = /^[\w%°µμΩÅ‰′″ .·⋅×*/^()+⁰¹²³⁴⁵⁶⁷⁸⁹⁻-]{1,100}$/;
const RAISED = "⁰¹²³⁴⁵⁶⁷⁸⁹⁻";
const PART =
  /(?<number>(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?)|(?<symbol>[A-Za-z%°µμΩÅ‰′″_]+)(?<power>-?\d+)?/g;

/**
 * Parses with mathjs, symbols replaced by plain names (it has no letter for `%` and `°`, and words
 * of its own for `in` and `mod`). `m2` and `s-1` are powers and a point is a product, as the FITS
 * standard (4.0, section 4.3) writes them; so are raised figures. A product without a sign binds
 * closer than a stroke: `erg / s cm^2` is per second and per square centimetre (common practice).
 */
function compoundOf(text: string): Unit | null {
  if (!COMPOUND.test(text)) return null;
  const symbols: string[] = [];
  const written = text
    .replaceAll(/[⁰¹²³⁴⁵⁶⁷⁸⁹⁻]+/g, (power) => `^(${[...power].map(lowered).join("")})`)
    .replaceAll("**", "^")
    .replaceAll(/[·⋅×]|\.(?!\d)/g, "*")
    .replaceAll(PART, (...match) => {
      const { number, symbol, power } = match.at(-1) as Record<string, string | undefined>;
      if (number !== undefined || symbol === undefined) return ` ${number} `;
      symbols.push(symbol);
      return ` _${symbols.length - 1}${power === undefined ? "" : `^(${power})`} `;
    });
  try {
    const unit = evaluate(parseText(written), symbols);
    return unit !== null && unit.factor > 0 && Number.isFinite(unit.factor) ? unit : null;
  } catch (error) {
    if (error instanceof SyntaxError) return null;
    throw error;
  }
}

function lowered(figure: string): string {
  const value = RAISED.indexOf(figure);
  return value === 10 ? "-" : String(value);
}

function evaluate(node: MathNode, symbols: string[]): Unit | null {
  switch (node.type) {
    case "ParenthesisNode":
      return evaluate((node as ParenthesisNode).content, symbols);
    case "ConstantNode": {
      const value: unknown = (node as ConstantNode).value;
      return typeof value === "number" && value > 0 && Number.isFinite(value)
        ? { factor: value, offset: 0, dimension: {} }
        : null;
    }
    case "SymbolNode": {
      const symbol = symbols[Number((node as SymbolNode).name.slice(1))];
      const unit = symbol === undefined ? null : definitionOf(symbol);
      // A temperature with its own zero has none inside a product.
      return unit === null || unit.offset !== 0 ? null : unit;
    }
    case "OperatorNode":
      return operation(node as OperatorNode, symbols);
    default:
      return null;
  }
}

/** Far beyond any unit's, but for powers of ten. */
const HIGHEST_POWER = 99;

function operation(node: OperatorNode, symbols: string[]): Unit | null {
  const [first, second] = node.args as [MathNode, MathNode | undefined];
  if (second === undefined) return null;
  const left = evaluate(first, symbols);
  if (left === null) return null;
  if (node.op === "^") {
    const power = exponent(second);
    return power === null || Math.abs(power) > HIGHEST_POWER ? null : powerOf(left, power);
  }
  const right = evaluate(second, symbols);
  if (right === null) return null;
  if (node.op === "*") return product(left, right);
  return node.op === "/" ? product(left, powerOf(right, -1)) : null;
}

function exponent(node: MathNode): number | null {
  if (node.type === "ParenthesisNode") return exponent((node as ParenthesisNode).content);
  if (node.type === "ConstantNode") {
    const value: unknown = (node as ConstantNode).value;
    return typeof value === "number" ? value : null;
  }
  const { op, args } = node as OperatorNode;
  if (node.type !== "OperatorNode") return null;
  const values = args.map(exponent);
  const [a, b] = values;
  if (a === null || a === undefined || b === null) return null;
  if (op === "-" && b === undefined) return -a;
  return op === "/" && b !== undefined ? a / b : null;
}

function powerOf(unit: Unit, power: number): Unit {
  const dimension: Dimension = {};
  for (const base of bases) {
    if (unit.dimension[base] !== undefined) dimension[base] = unit.dimension[base] * power;
  }
  return { factor: unit.factor ** power, offset: 0, dimension };
}

function product(a: Unit, b: Unit): Unit {
  const dimension: Dimension = {};
  for (const base of bases) {
    const power = (a.dimension[base] ?? 0) + (b.dimension[base] ?? 0);
    if (power !== 0) dimension[base] = power;
  }
  return { factor: a.factor * b.factor, offset: 0, dimension };
}

/**
 * A measurement in its observable's unit: value, sd, plus and minus converted; a fraction in dex
 * (sdDex) is the same in every unit. A unit that isn't known is an opaque label: nothing is
 * converted, and `unknownUnit` says so.
 */
export function inObservableUnit(
  measurement: Measurement,
  observable: Pick<Observable, "unit">,
): { measurement: Measurement; unknownUnit: boolean } {
  const { unit } = measurement;
  if (unit === null || observable.unit === null || unit === observable.unit) {
    return { measurement, unknownUnit: false };
  }
  const found = conversion(unit, observable.unit);
  if (found.kind !== "factor") return { measurement, unknownUnit: true };
  const { factor, offset } = found;
  const scaled = (width: number | null) => (width === null ? null : width * factor);
  return {
    measurement: {
      ...measurement,
      value: measurement.value === null ? null : measurement.value * factor + offset,
      sd: scaled(measurement.sd),
      plus: scaled(measurement.plus),
      minus: scaled(measurement.minus),
      unit: observable.unit,
    },
    unknownUnit: false,
  };
}
