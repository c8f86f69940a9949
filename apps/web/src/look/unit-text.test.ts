import { expect, test } from "vitest";
import { unitText } from "./unit-text";

test("whole powers of a unit are raised, others stay as they were typed", () => {
  expect(unitText("mW/m^2")).toBe("mW/m²");
  expect(unitText("kg m^-1 s^(-12)")).toBe("kg m⁻¹ s⁻¹²");
  expect(unitText("Hz^0.5")).toBe("Hz^0.5");
  expect(unitText("arcsec")).toBe("arcsec");
});
