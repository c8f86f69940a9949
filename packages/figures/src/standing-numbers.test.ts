import { expect, test } from "vitest";
import {
  formatChiSquare,
  formatLog10B,
  formatP,
  formatPosterior,
  formatTension,
} from "./standing-numbers";

test("log10 B has two decimals, more only where it would look like nothing", () => {
  expect(formatLog10B(0)).toBe("0");
  expect(formatLog10B(-29.356763)).toBe("−29.36");
  expect(formatLog10B(-0.0031)).toBe("−0.003");
  expect(formatLog10B(-0.00031)).toBe("−0.0003");
  expect(formatLog10B(-0.0000031)).toBe("−3 ×\u00a010⁻⁶");
  expect(formatLog10B(-123456.78)).toBe("−123457");
  expect(formatLog10B(-0.8123, 0.0213)).toBe("−0.812 ± 0.021");
});

test("a likelihood of zero hangs at minus infinity", () => {
  expect(formatLog10B(null)).toBe("−∞");
});

test("p-values go to powers of ten below a thousandth", () => {
  expect(formatP(0.4126340427)).toBe("0.41");
  expect(formatP(0.0241)).toBe("0.024");
  expect(formatP(1.814688e-30)).toBe("1.8 ×\u00a010⁻³⁰");
  expect(formatP(0.9987)).toBe("0.999");
  expect(formatP(0.99999)).toBe("> 0.999");
  expect(formatP(1)).toBe("1");
  expect(formatP(0)).toBe("< 5\u00a0×\u00a010⁻³²⁴");
  expect(formatP(null)).toBe("–");
});

test("a posterior near one is shown by what it lacks", () => {
  expect(formatPosterior(0.9999999978594563)).toBe("1 − 2.1 ×\u00a010⁻⁹");
  expect(formatPosterior(2.1405437067964282e-9)).toBe("2.1 ×\u00a010⁻⁹");
  expect(formatPosterior(0.93)).toBe("0.93");
  expect(formatPosterior(0.9964)).toBe("0.996");
  expect(formatPosterior(1 - 1e-15)).toBe("1");
  expect(formatPosterior(0)).toBe("0");
});

test("chi-square stands over its degrees of freedom", () => {
  expect(formatChiSquare(1.7703883478, 2)).toBe("1.77 / 2");
  expect(formatChiSquare(null, 0)).toBe("–");
});

test("tension carries its sign, zero none", () => {
  expect(formatTension(0.42)).toBe("+0.4");
  expect(formatTension(-3.08)).toBe("−3.1");
  expect(formatTension(-0.01)).toBe("0.0");
  expect(formatTension(0.01)).toBe("0.0");
  expect(formatTension(null)).toBe("–");
  expect(formatTension(123.4)).toBe("+123");
});
