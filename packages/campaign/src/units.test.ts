import { describe, expect, test } from "vitest";
import { conversion, inObservableUnit, unitOf } from "./units";
import { quantity } from "./testing/documents";

function factor(from: string, to: string): number {
  const found = conversion(from, to);
  if (found.kind !== "factor") throw new Error(`${from} to ${to}: ${found.kind}`);
  return found.factor;
}

// A conversion is two or three multiplications of rounded factors: 4 units in the last place.
const PRECISION = 4 * Number.EPSILON;

/**
 * Published values, see test/reference/README.md: SI Brochure 9 (BIPM 2019), IAU 2012 B2 and
 * 2015 B2, NIST SP 811 appendix B; angles from their definitions.
 */
const published: [string, string, number][] = [
  ["arcsec", "rad", 4.84813681109536e-6],
  ["arcmin", "rad", 0.0002908882086657216],
  ["deg", "rad", 0.017453292519943295],
  ["mas", "rad", 4.84813681109536e-9],
  ["rad", "arcsec", 206264.80624709636],
  ["sr", "deg^2", 3282.8063500117437],
  ["sr", "arcsec^2", 42545170296.1522],
  ["pc", "m", 3.085677581491367e16],
  ["kpc", "m", 3.085677581491367e19],
  ["Mpc", "m", 3.085677581491367e22],
  ["pc", "au", 206264.80624709636],
  ["ly", "m", 9460730472580800],
  ["pc", "ly", 3.2615637771674337],
  ["yr", "s", 31557600],
  ["d", "s", 86400],
  ["Jy", "W/(m^2 Hz)", 1e-26],
  ["Jy", "erg s-1 cm-2 Hz-1", 1e-23],
  ["eV", "J", 1.602176634e-19],
  ["keV", "J", 1.602176634e-16],
  ["erg", "J", 1e-7],
  ["cal", "J", 4.184],
  ["kW h", "J", 3600000],
  ["in", "m", 0.0254],
  ["ft", "m", 0.3048],
  ["mi", "m", 1609.344],
  ["nmi", "m", 1852],
  ["lb", "kg", 0.45359237],
  ["atm", "Pa", 101325],
  ["bar", "Pa", 100000],
  ["Torr", "Pa", 133.32236842105263],
  ["barn", "m^2", 1e-28],
  ["G", "T", 1e-4],
  ["Angstrom", "m", 1e-10],
  ["L", "m^3", 1e-3],
  ["Ci", "Bq", 3.7e10],
];

describe("units that are known", () => {
  test.each(published)("%s is %s times %d", (from, to, value) => {
    expect(Math.abs(factor(from, to) / value - 1)).toBeLessThanOrEqual(PRECISION);
    expect(Math.abs(factor(to, from) * value - 1)).toBeLessThanOrEqual(PRECISION);
  });

  test.each([
    ["kg/s", "g / s", 1000],
    ["kg m^2 / s^2", "J", 1],
    ["m/s", "km/h", 3.6],
    ["ug/m3", "kg m^-3", 1e-9],
    ["%", "1", 0.01],
    ["ppm", "%", 1e-4],
    ["mmag", "mag", 1e-3],
    ["1/d", "Hz", 1 / 86400],
    ["10^3 kg", "t", 1],
    ["kg·m·s**-2", "N", 1],
    ["W.m-2.um-1", "W m^-3", 1e6],
    ["m^(1/2)", "cm^(1/2)", 10],
  ])("%s is %s times %d (from the prefixes and definitions)", (from, to, value) => {
    expect(Math.abs(factor(from, to) / value - 1)).toBeLessThanOrEqual(PRECISION);
  });

  test("a temperature's zero moves its value, never its uncertainty", () => {
    // SI Brochure 9: t/°C = T/K - 273.15; NIST SP 811: T/K = (t/°F + 459.67) / 1.8.
    expect(conversion("degC", "K")).toEqual({ kind: "factor", factor: 1, offset: 273.15 });
    const measurement = quantity({ value: 212, sd: 1.8, plus: 3.6, unit: "degF" });
    const converted = inObservableUnit(measurement, { unit: "degC" }).measurement;
    expect(converted.value).toBeCloseTo(100, 10);
    expect(converted.sd).toBeCloseTo(1, 12);
    expect(converted.plus).toBeCloseTo(2, 12);
    expect(converted.unit).toBe("degC");
  });

  test("a temperature with its own zero has none inside a product", () => {
    expect(unitOf("degC/s")).toBeNull();
  });
});

describe("units of another dimension and labels", () => {
  test.each([
    ["kg", "m"],
    ["deg", "1"],
    ["mag", "Jy"],
    ["kg/s", "kg"],
    ["Jy", "W"],
  ])("%s is no %s", (from, to) => {
    expect(conversion(from, to)).toEqual({ kind: "other-dimension" });
  });

  test.each([
    ["furlong"],
    ["ADU"],
    ["m +"],
    ["m + s"],
    ["(m"],
    ["m^s"],
    ["m^1e300"],
    ["-m"],
    ["m^"],
  ])("%s is a label", (text) => {
    expect(unitOf(text)).toBeNull();
    expect(conversion(text, "m")).toEqual({ kind: "unknown" });
    expect(conversion(text, text)).toEqual({ kind: "factor", factor: 1, offset: 0 });
  });

  test("a measurement with a label keeps its numbers, and says so", () => {
    const measurement = quantity({ value: 3, sd: 1, unit: "ADU" });
    expect(inObservableUnit(measurement, { unit: "m" })).toEqual({
      measurement,
      unknownUnit: true,
    });
  });
});

test("a measurement is converted with its uncertainties; dex are the same in every unit", () => {
  const measurement = quantity({ value: 3600, sd: 36, sdDex: 0.1, unit: "arcsec" });
  const { measurement: converted, unknownUnit } = inObservableUnit(measurement, { unit: "deg" });
  expect(unknownUnit).toBe(false);
  expect(converted.value).toBeCloseTo(1, 14);
  expect(converted.sd).toBeCloseTo(0.01, 16);
  expect(converted.sdDex).toBe(0.1);
});
