const superscripts = ["⁰", "¹", "²", "³", "⁴", "⁵", "⁶", "⁷", "⁸", "⁹"];

/** A unit as print has it: `m^2` as m², `s^-1` as s⁻¹; what is not a whole power stays as typed. */
export function unitText(unit: string): string {
  return unit.replaceAll(/\^\(?(-?)(\d+)\)?(?![\d.])/g, (_, sign: string, digits: string) =>
    [sign ? "⁻" : "", ...Array.from(digits, (digit) => superscripts[Number(digit)])].join(""),
  );
}
