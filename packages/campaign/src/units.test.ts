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

describe("units that are known", () => {
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
    ["W m⁻² µm⁻¹", "W/m^3", 1e6],
    ["km/s/Mpc", "km s^-1 Mpc^-1", 1],
    ["1e-17 erg/s/cm^2/Å", "W m^-2 um^-1", 1e-16],
    ["2.5 kg", "g", 2500],
    ["µJy", "nJy", 1000],
    ["kg × m / s2", "N", 1],
    ["mas/yr", "arcsec/century", 0.1],
    ["mGal", "m/s^2", 1e-5],
    ["cP", "Pa s", 1e-3],
    ["kn", "km/h", 1.852],
    ["mmol/L", "mol/m3", 1],
    ["mM", "mmol/L", 1],
    ["uSv/h", "mSv/d", 0.024],
    ["1/h", "1/d", 24],
  ])("%s is %s times %d by prefixes and definitions", (from, to, value) => {
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

  test("solar masses a year are kilograms a second, by GM over G and the Julian year", () => {
    // IAU 2015 B3 and CODATA 2022: 1.3271244e20 / 6.6743e-11 / 31557600.
    const kilograms = 1.3271244e20 / 6.6743e-11 / 31_557_600;
    expect(Math.abs(factor("Msun/yr", "kg/s") / kilograms - 1)).toBeLessThanOrEqual(PRECISION);
    expect(factor("M_sun yr-1", "Msun/yr")).toBe(1);
  });

  test.each([
    ["furlong"],
    ["ADU"],
    ["ct"],
    ["dB"],
    ["mJy/beam"],
    ["mag/arcsec^2"],
    ["mag arcsec-2"],
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
