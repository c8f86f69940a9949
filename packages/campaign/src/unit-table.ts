/**
 * The units that are converted. Sources: the SI Brochure (BIPM, 9th ed. 2019), tables 1 to 8, for
 * base, derived and accepted units and prefixes; IAU 2012 Resolution B2 for the astronomical unit,
 * IAU 2015 Resolutions B2 for the parsec and B3 for nominal solar and planetary values; CODATA
 * 2022 for measured constants; NIST SP 811, appendix B, for the others. Angle, magnitude and dex
 * have dimensions of their own here: a degree isn't a bare number.
 */
export const bases = ["m", "kg", "s", "A", "K", "mol", "cd", "rad", "mag", "dex"] as const;
export type Base = (typeof bases)[number];

/** Powers of the bases; those left out are 0. */
export type Dimension = Partial<Record<Base, number>>;

/** A value in the unit times `factor`, plus `offset`, is the value in the bases. */
export type UnitDefinition = {
  factor: number;
  offset: number;
  dimension: Dimension;
  prefixed: boolean;
};

const definitions = new Map<string, UnitDefinition>();

function define(
  names: string,
  factor: number,
  dimension: Dimension,
  options: { prefixed?: boolean; offset?: number } = {},
): void {
  const { prefixed = false, offset = 0 } = options;
  for (const name of names.split(" ")) {
    definitions.set(name, { factor, offset, dimension, prefixed });
  }
}

const prefixed = { prefixed: true };
const energy: Dimension = { kg: 1, m: 2, s: -2 };
const pressure: Dimension = { kg: 1, m: -1, s: -2 };
const AU_M = 149_597_870_700;
const PC_M = (AU_M * 648_000) / Math.PI;
const YEAR_S = 31_557_600;
const LIGHT_M_S = 299_792_458;
/** CODATA 2022; relative uncertainty 2.2e-5, which masses in kg of Sun and planets carry with them. */
const G_M3_KG_S2 = 6.6743e-11;
const HARTREE_J = 4.359744722206e-18;

// SI base and derived units.
define("m", 1, { m: 1 }, prefixed);
define("g", 1e-3, { kg: 1 }, prefixed);
define("s", 1, { s: 1 }, prefixed);
define("A", 1, { A: 1 }, prefixed);
define("K", 1, { K: 1 }, prefixed);
define("mol", 1, { mol: 1 }, prefixed);
define("cd", 1, { cd: 1 }, prefixed);
define("lm", 1, { cd: 1, rad: 2 }, prefixed);
define("Hz Bq", 1, { s: -1 }, prefixed);
define("N", 1, { kg: 1, m: 1, s: -2 }, prefixed);
define("Pa", 1, pressure, prefixed);
define("J", 1, energy, prefixed);
define("W", 1, { kg: 1, m: 2, s: -3 }, prefixed);
define("C", 1, { A: 1, s: 1 }, prefixed);
define("V", 1, { kg: 1, m: 2, s: -3, A: -1 }, prefixed);
define("F", 1, { kg: -1, m: -2, s: 4, A: 2 }, prefixed);
define("Ohm ohm Ω", 1, { kg: 1, m: 2, s: -3, A: -2 }, prefixed);
define("S", 1, { kg: -1, m: -2, s: 3, A: 2 }, prefixed);
define("Wb", 1, { kg: 1, m: 2, s: -2, A: -1 }, prefixed);
define("T", 1, { kg: 1, s: -2, A: -1 }, prefixed);
define("H", 1, { kg: 1, m: 2, s: -2, A: -2 }, prefixed);
define("Gy Sv", 1, { m: 2, s: -2 }, prefixed);
define("lx", 1, { cd: 1, rad: 2, m: -2 }, prefixed);
define("rad", 1, { rad: 1 }, prefixed);
define("sr", 1, { rad: 2 }, prefixed);
define("degC °C celsius", 1, { K: 1 }, { offset: 273.15 });
define("degF °F", 5 / 9, { K: 1 }, { offset: 459.67 * (5 / 9) });

// Accepted with the SI.
define("min", 60, { s: 1 });
define("h hr hour", 3600, { s: 1 });
define("d day", 86_400, { s: 1 });
define("yr", YEAR_S, { s: 1 }, prefixed);
define("a", YEAR_S, { s: 1 }, prefixed);
define("deg °", Math.PI / 180, { rad: 1 });
define("arcmin ′", Math.PI / 10_800, { rad: 1 });
define("arcsec ″", Math.PI / 648_000, { rad: 1 }, prefixed);
define("mas", Math.PI / 648e6, { rad: 1 });
define("uas μas µas", Math.PI / 648e9, { rad: 1 });
define("L l", 1e-3, { m: 3 }, prefixed);
// Without prefixes: a count is written ct.
define("t", 1e3, { kg: 1 });
define("kt", 1e6, { kg: 1 });
define("Mt", 1e9, { kg: 1 });
define("Gt", 1e12, { kg: 1 });
define("eV", 1.602176634e-19, energy, prefixed);
define("Da u amu", 1.66053906892e-27, { kg: 1 }, prefixed);

// Astronomy, spectroscopy, radiation.
define("au AU", AU_M, { m: 1 });
define("pc", PC_M, { m: 1 }, prefixed);
define("ly lyr", LIGHT_M_S * YEAR_S, { m: 1 }, prefixed);
define("century cy", 100 * YEAR_S, { s: 1 });
define("Jy", 1e-26, { kg: 1, s: -2 }, prefixed);
define("Angstrom angstrom Å", 1e-10, { m: 1 });
define("erg", 1e-7, energy);
define("G gauss", 1e-4, { kg: 1, s: -2, A: -1 }, prefixed);
define("barn b", 1e-28, { m: 2 }, prefixed);
define("Ci", 3.7e10, { s: -1 }, prefixed);
define("mag", 1, { mag: 1 }, prefixed);
define("dex", 1, { dex: 1 });

// Nominal values of Sun, Earth and Jupiter (radii at the equator), and masses by way of G.
for (const [body, radius, parameter] of [
  ["sun", 6.957e8, 1.3271244e20],
  ["earth", 6.3781e6, 3.986004e14],
  ["jup", 7.1492e7, 1.2668653e17],
] as const) {
  define(`R${body} R_${body}`, radius, { m: 1 });
  define(`GM${body} GM_${body}`, parameter, { m: 3, s: -2 });
  define(`M${body} M_${body}`, parameter / G_M3_KG_S2, { kg: 1 });
}
define("Lsun L_sun", 3.828e26, { kg: 1, m: 2, s: -3 });

// Atoms.
define("me m_e", 9.1093837139e-31, { kg: 1 });
define("mp m_p", 1.67262192595e-27, { kg: 1 });
define("bohr", 5.29177210544e-11, { m: 1 });
define("hartree Eh", HARTREE_J, energy);
define("Ry", HARTREE_J / 2, energy);

// Other units in laboratories and in the field.
define("bar", 1e5, pressure, prefixed);
define("atm", 101_325, pressure);
define("Torr torr", 101_325 / 760, pressure);
define("mmHg", 133.322387415, pressure);
define("cal", 4.184, energy, prefixed);
define("in inch", 0.0254, { m: 1 });
define("ft", 0.3048, { m: 1 });
define("mi", 1609.344, { m: 1 });
define("nmi", 1852, { m: 1 });
define("lb", 0.45359237, { kg: 1 });
define("ha", 1e4, { m: 2 });
define("wk week", 604_800, { s: 1 });
define("kn knot", 1852 / 3600, { m: 1, s: -1 });
define("dyn", 1e-5, { kg: 1, m: 1, s: -2 });
define("P", 0.1, { kg: 1, m: -1, s: -1 }, prefixed);
define("Gal", 1e-2, { m: 1, s: -2 }, prefixed);
define("Wh", 3600, energy, prefixed);
define("psi", 6894.757293168362, pressure);
define("oz", 0.028349523125, { kg: 1 });
define("yd", 0.9144, { m: 1 });
define("gal", 0.003785411784, { m: 3 });
define("M", 1e3, { mol: 1, m: -3 }, prefixed);

// Bare numbers.
define("1", 1, {});
define("%", 1e-2, {});
define("‰ permil permille", 1e-3, {});
define("ppm", 1e-6, {});
define("ppb", 1e-9, {});
define("ppt", 1e-12, {});

const prefixes = new Map<string, number>([
  ["da", 1e1],
  ["h", 1e2],
  ["k", 1e3],
  ["M", 1e6],
  ["G", 1e9],
  ["T", 1e12],
  ["P", 1e15],
  ["E", 1e18],
  ["Z", 1e21],
  ["Y", 1e24],
  ["R", 1e27],
  ["Q", 1e30],
  ["d", 1e-1],
  ["c", 1e-2],
  ["m", 1e-3],
  ["u", 1e-6],
  ["µ", 1e-6],
  ["μ", 1e-6],
  ["n", 1e-9],
  ["p", 1e-12],
  ["f", 1e-15],
  ["a", 1e-18],
  ["z", 1e-21],
  ["y", 1e-24],
  ["r", 1e-27],
  ["q", 1e-30],
]);

/** One unit by its symbol: as it is written, else with a prefix; null when it isn't known. */
export function definitionOf(symbol: string): UnitDefinition | null {
  const whole = definitions.get(symbol);
  if (whole !== undefined) return whole;
  for (const length of [1, 2]) {
    const prefix = prefixes.get(symbol.slice(0, length));
    const unit = definitions.get(symbol.slice(length));
    if (prefix !== undefined && unit?.prefixed) return { ...unit, factor: prefix * unit.factor };
  }
  return null;
}
