import { expect, test } from "vitest";
import { texText } from "./escape";

test.each([
  ["50 % of $x_1^2 & #3", "50 \\% of \\$x\\_\\allowbreak{}1\\textasciicircum{}2 \\& \\#3"],
  ["\\input{a}", "\\textbackslash{}input\\{a\\}"],
  // After a line's end a bracket or a star would be the command's argument.
  ["[a] *", "{[}a{]} {*}"],
  [
    "Größe Ångström naïve Łódź",
    'Gr\\"{o}\\ss{}e \\r{A}ngstr\\"{o}m na\\"{\\i}ve \\L{}\\\'{o}d\\\'{z}',
  ],
  ["e\u0301 and é are one", "\\'{e} and \\'{e} are one"],
  ["−3 ± 0.1 µm", "\\ensuremath{-}3 \\ensuremath{\\pm} 0.1 \\ensuremath{\\mu}m"],
  [
    "χ² Ω ς",
    "\\ensuremath{\\chi}\\ensuremath{^{2}} \\ensuremath{\\Omega} \\ensuremath{\\varsigma}",
  ],
  ["-- a–b", "{-}{-} a--b"],
  ["潮\u{1f30a}", "{[}U+6F6E{]}{[}U+1F30A{]}"],
  ["two\nlines", "two lines"],
])("%j is printed by %j", (text, tex) => expect(texText(text)).toBe(tex));
