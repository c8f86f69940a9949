import { describe, expect, test } from "vitest";
import {
  formatCount,
  formatFixed,
  formatInterval,
  formatMeasured,
  formatNumber,
  formatPercent,
  formatWithUncertainty,
  inPowersOfTen,
  partAtDecimal,
  roundToUncertainty,
} from "./numbers";

describe("rounding to the uncertainty", () => {
  // JCGM 100:2008, 7.2.6: "if y = 10,057 62 Ω with uc(y) = 27 mΩ, y should be rounded to 10,058 Ω";
  // "a value such as u(xi) = 28,05 kHz should be rounded down to 28 kHz".
  test("the GUM's printed examples come out as printed", () => {
    expect(roundToUncertainty(10.05762, 0.027)).toEqual({
      value: "10.058",
      uncertainty: "0.027",
      exponent: 0,
    });
    expect(roundToUncertainty(0, 28.05).uncertainty).toBe("28");
  });

  // JCGM 100:2008, 7.2.2: mS = 100,021 47 g with uc = 0,35 mg, printed (100,021 47 ± 0,000 35) g
  // (from memory; the digits are the document's running example).
  test("the GUM's 100 g standard keeps its five decimals", () => {
    expect(formatWithUncertainty(100.02147, 0.00035)).toBe("100.02147 ± 0.00035");
  });

  test("an uncertainty that rounds up to the next power keeps two digits", () => {
    expect(formatWithUncertainty(1.2345, 0.0996)).toBe("1.23 ± 0.10");
    expect(formatWithUncertainty(12.345, 0.996)).toBe("12.3 ± 1.0");
  });

  test("an uncertainty above 100 rounds the value before its decimal point", () => {
    expect(formatWithUncertainty(56_789, 1234)).toBe("56800 ± 1200");
  });

  test("a Julian date keeps the digits that its small uncertainty supports", () => {
    expect(formatWithUncertainty(2_460_000.123_46, 0.0001)).toBe("2460000.12346 ± 0.00010");
  });

  test("very large and very small quantities share one power of ten", () => {
    expect(formatWithUncertainty(5.9722e24, 6e20)).toBe("(5.97220 ± 0.00060) ×\u00a010²⁴");
    expect(formatWithUncertainty(-1.2e-7, 3e-9)).toBe("(−1.200 ± 0.030) ×\u00a010⁻⁷");
  });

  test("a value that rounds to zero has no sign", () => {
    expect(formatWithUncertainty(-0.001, 0.3)).toBe("0.00 ± 0.30");
  });

  test("an exact value stands without an uncertainty", () => {
    expect(formatWithUncertainty(1.75, 0)).toBe("1.75");
    expect(formatWithUncertainty(1.75, null)).toBe("1.75");
  });
});

test("a value on a log10 scale is rounded to what its dex leave certain", () => {
  // 0.040 dex is a factor 1.0965: about 0.75 of 8.1.
  expect(formatMeasured(8.1234, 0.04, { scale: "log10", unit: "kg/s" })).toBe(
    "8.12\u00a0kg/s ± 0.040\u00a0dex",
  );
  expect(formatMeasured(8.1234, 0.6, { scale: "linear", unit: "kg/s" })).toBe(
    "8.12 ± 0.60\u00a0kg/s",
  );
  expect(formatMeasured(8.1234, 0.6, { scale: "linear", unit: "1" })).toBe("8.12 ± 0.60");
});

test("numbers carry a true minus and no trailing zeros", () => {
  expect(formatNumber(-2.5)).toBe("−2.5");
  expect(formatNumber(0.1 + 0.2)).toBe("0.3");
  expect(formatNumber(1234567)).toBe("1234567");
  expect(formatNumber(1234567.8)).toBe("1.23457 ×\u00a010⁶");
  expect(formatNumber(-0.000012)).toBe("−1.2 ×\u00a010⁻⁵");
  expect(formatNumber(0)).toBe("0");
  expect(formatNumber(-0)).toBe("0");
  expect(formatNumber(Infinity)).toBe("∞");
  expect(formatNumber(-Infinity)).toBe("−∞");
  expect(formatFixed(-0.001, 2)).toBe("0.00");
  expect(inPowersOfTen(3.14e-7)).toBe("3.1 ×\u00a010⁻⁷");
});

test("counts are grouped by threes from five digits", () => {
  expect(formatCount(4123)).toBe("4123");
  expect(formatCount(200_000)).toBe("200\u202f000");
});

test("an interval names its open end", () => {
  expect(formatInterval(5.2, 11)).toBe("5.2 to 11");
  expect(formatInterval(null, 11)).toBe("≤\u00a011");
  expect(formatInterval(5.2, null)).toBe("≥\u00a05.2");
  expect(formatInterval(null, null)).toBe("–");
  expect(formatInterval(1.75, 1.75)).toBe("1.75");
});

test("a fraction is shown in percent", () => {
  expect(formatPercent(0.95)).toBe("95\u00a0%");
});

test("a number parts at its decimal point", () => {
  expect(partAtDecimal("−2.63")).toEqual(["−2", ".63"]);
  expect(partAtDecimal("7")).toEqual(["7", ""]);
  expect(partAtDecimal("0 ± 1")).toEqual(["0", " ± 1"]);
});
