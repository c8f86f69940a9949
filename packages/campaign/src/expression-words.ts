/** What an expression may call and which constants it may name. */
type Callable = { least: number; most: number; call: (...values: number[]) => number };

const one = (call: (value: number) => number): Callable => ({ least: 1, most: 1, call });

export const functions: ReadonlyMap<string, Callable> = new Map(
  Object.entries({
    sqrt: one(Math.sqrt),
    exp: one(Math.exp),
    log: one(Math.log),
    log10: one(Math.log10),
    sin: one(Math.sin),
    cos: one(Math.cos),
    tan: one(Math.tan),
    asin: one(Math.asin),
    acos: one(Math.acos),
    atan: one(Math.atan),
    atan2: { least: 2, most: 2, call: Math.atan2 },
    abs: one(Math.abs),
    min: { least: 1, most: Infinity, call: Math.min },
    max: { least: 1, most: Infinity, call: Math.max },
  }),
);

export const constants: ReadonlyMap<string, number> = new Map([
  ["pi", Math.PI],
  ["e", Math.E],
  ["deg", Math.PI / 180],
]);

export const TABLE = "table";

/** Names that no parameter, column, condition or table may have. */
export function isReserved(name: string): boolean {
  return functions.has(name) || constants.has(name) || name === TABLE;
}
