import { conversion } from "@weighhouse/campaign/units";
import { describe, expect, test } from "vitest";
import { record, relative } from "./records";

function factor(from: string, to: string): number {
  const found = conversion(from, to);
  if (found.kind !== "factor") throw new Error(`${from} to ${to}: ${found.kind}`);
  return found.factor;
}

/** A conversion is a few multiplications of rounded factors, each half a unit in the last place. */
const PRECISION = 8 * Number.EPSILON;

/** Members of a record that are one unit in another: the member, from, to. */
function check(id: string, rows: [member: string, from: string, to: string][]): void {
  describe(id, () => {
    const { expected, source } = record<Record<string, number>>(id);
    test.each(rows)(`%s: %s in %s (${source.replaceAll("%", "%%")})`, (member, from, to) => {
      const value = expected[member];
      if (value === undefined) throw new Error(`${id} has no ${member}`);
      expect(relative(factor(from, to), value)).toBeLessThanOrEqual(PRECISION);
      expect(relative(factor(to, from) * value, 1)).toBeLessThanOrEqual(PRECISION);
    });
  });
}

check("units.angle", [
  ["arcsec_rad", "arcsec", "rad"],
  ["arcmin_rad", "arcmin", "rad"],
  ["deg_rad", "deg", "rad"],
  ["mas_rad", "mas", "rad"],
  ["rad_arcsec", "rad", "arcsec"],
  ["sr_deg2", "sr", "deg^2"],
  ["sr_arcsec2", "sr", "arcsec2"],
]);

check("units.astro_length", [
  ["pc_m", "pc", "m"],
  ["kpc_m", "kpc", "m"],
  ["Mpc_m", "Mpc", "m"],
  ["pc_au", "pc", "au"],
  ["ly_m", "ly", "m"],
  ["pc_ly", "pc", "ly"],
  ["julian_year_s", "yr", "s"],
  ["day_s", "d", "s"],
]);

check("units.flux", [
  ["Jy_SI", "Jy", "W/(m^2 Hz)"],
  ["Jy_cgs_erg_s_cm2_Hz", "Jy", "erg/(s cm^2 Hz)"],
]);

check("units.energy", [
  ["eV_J", "eV", "J"],
  ["keV_J", "keV", "J"],
  ["erg_J", "erg", "J"],
  ["cal_th_J", "cal", "J"],
  ["kWh_J", "kWh", "J"],
]);

check("units.misc", [
  ["inch_m", "in", "m"],
  ["foot_m", "ft", "m"],
  ["mile_m", "mi", "m"],
  ["nautical_mile_m", "nmi", "m"],
  ["lb_kg", "lb", "kg"],
  ["oz_kg", "oz", "kg"],
  ["atm_Pa", "atm", "Pa"],
  ["bar_Pa", "bar", "Pa"],
  ["torr_Pa", "Torr", "Pa"],
  ["psi_Pa", "psi", "Pa"],
  ["barn_m2", "barn", "m^2"],
  ["gauss_T", "G", "T"],
  ["angstrom_m", "Angstrom", "m"],
  ["litre_m3", "L", "m^3"],
  ["curie_Bq", "Ci", "Bq"],
  ["US_gallon_m3", "gal", "m3"],
  ["fermi_m", "fm", "m"],
]);

check("units.IAU2015_B3", [
  ["R_sun_m", "Rsun", "m"],
  ["L_sun_W", "Lsun", "W"],
  ["GM_sun_m3_s2", "GMsun", "m^3 s^-2"],
  ["R_earth_m", "Rearth", "m"],
  ["GM_earth_m3_s2", "GMearth", "m3/s2"],
  ["R_jup_m", "Rjup", "m"],
  ["GM_jup_m3_s2", "GMjup", "m3/s2"],
  ["M_sun_kg", "Msun", "kg"],
  ["M_earth_kg", "Mearth", "kg"],
  ["M_jup_kg", "Mjup", "kg"],
]);

test("constants that units carry are CODATA 2022's (units.CODATA2022)", () => {
  const { expected } = record<Record<string, { value: number; unit: string }>>("units.CODATA2022");
  const carried = {
    "atomic mass constant": "u",
    "electron mass": "me",
    "proton mass": "mp",
    "Bohr radius": "bohr",
    "Hartree energy": "hartree",
    "electron volt": "eV",
  };
  for (const [constant, unit] of Object.entries(carried)) {
    const { value, unit: in_ } = expected[constant]!;
    expect(relative(factor(unit, in_), value)).toBeLessThanOrEqual(PRECISION);
  }
  // The record's is CODATA 2018's, whose relative uncertainty is 1.9e-12.
  const { hartree_eV } = record<{ hartree_eV: number }>("units.energy").expected;
  expect(relative(factor("hartree", "eV"), hartree_eV)).toBeLessThan(1.9e-12);
});

test("exact constants of the SI hold in its derived units (units.SI_exact)", () => {
  const { c_m_per_s, e_C } = record<Record<string, number>>("units.SI_exact").expected as {
    c_m_per_s: number;
    e_C: number;
  };
  expect(relative(factor("ly/yr", "m/s"), c_m_per_s)).toBeLessThanOrEqual(PRECISION);
  expect(relative(factor("eV/V", "C"), e_C)).toBeLessThanOrEqual(PRECISION);
});

test("magnitudes and dex convert to nothing else, and milli is milli (units.magnitude)", () => {
  const { expected } = record<{ mag_per_dex: number }>("units.magnitude");
  // 2.5 mag are one dex of flux: a change of scale, with a sign, and no unit.
  expect(expected.mag_per_dex).toBe(2.5);
  expect(conversion("mag", "dex")).toEqual({ kind: "other-dimension" });
  expect(conversion("mag", "1")).toEqual({ kind: "other-dimension" });
  expect(factor("mmag", "mag")).toBe(1e-3);
  expect(conversion("mag/arcsec2", "mag/arcmin2")).toEqual({ kind: "unknown" });
});

test("temperatures have a zero of their own (units.misc)", () => {
  const { expected } = record<{ degC_K: number }>("units.misc");
  expect(conversion("degC", "K")).toEqual({ kind: "factor", factor: 1, offset: expected.degC_K });
});

test("Mercury's perihelion advances by what GMsun, au and century give (units.mercury_gr)", () => {
  const { inputs, expected } = record<
    { arcsec_per_century: number },
    { a_au: number; e: number; P_d: number }
  >("units.mercury_gr");
  const { a_au, e, P_d } = inputs;
  const perOrbit =
    (6 * Math.PI * factor("GMsun", "au^3/yr^2")) /
    (factor("ly/yr", "au/yr") ** 2 * a_au * (1 - e * e));
  const found = factor("rad", "arcsec") * perOrbit * (factor("century", "d") / P_d);
  expect(relative(found, expected.arcsec_per_century)).toBeLessThanOrEqual(1e-9);
});
