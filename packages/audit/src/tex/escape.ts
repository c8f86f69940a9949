/** ASCII that TeX reads as commands. */
const COMMANDS: Record<string, string> = {
  "\\": "\\textbackslash{}",
  "{": "\\{",
  "}": "\\}",
  $: "\\$",
  "&": "\\&",
  "#": "\\#",
  _: "\\_\\allowbreak{}",
  "%": "\\%",
  "~": "\\textasciitilde{}",
  "^": "\\textasciicircum{}",
  "<": "\\ensuremath{<}",
  ">": "\\ensuremath{>}",
  "|": "\\ensuremath{|}",
  // After a line's end these would be its arguments.
  "[": "{[}",
  "]": "{]}",
  "*": "{*}",
  '"': "{''}",
  "-": "{-}",
  "'": "{'}",
  "`": "{`}",
};

const GREEK = {
  names:
    "alpha beta gamma delta epsilon zeta eta theta iota kappa lambda mu nu xi omicron pi rho varsigma sigma tau upsilon phi chi psi omega",
  capitals: { Γ: 1, Δ: 1, Θ: 1, Λ: 1, Ξ: 1, Π: 1, Σ: 1, Υ: 1, Φ: 1, Ψ: 1, Ω: 1 },
};

const SYMBOLS: Record<string, string> = {
  "\u00a0": "~",
  "\u202f": "\\,",
  "\u2009": "\\,",
  "−": "\\ensuremath{-}",
  "±": "\\ensuremath{\\pm}",
  "×": "\\ensuremath{\\times}",
  "·": "\\ensuremath{\\cdot}",
  "≤": "\\ensuremath{\\le}",
  "≥": "\\ensuremath{\\ge}",
  "≠": "\\ensuremath{\\ne}",
  "≈": "\\ensuremath{\\approx}",
  "∞": "\\ensuremath{\\infty}",
  "→": "\\ensuremath{\\rightarrow}",
  "°": "\\ensuremath{^{\\circ}}",
  "′": "\\ensuremath{'}",
  "″": "\\ensuremath{''}",
  "√": "\\ensuremath{\\surd}",
  µ: "\\ensuremath{\\mu}",
  "⊙": "\\ensuremath{\\odot}",
  "‑": "{-}",
  "–": "--",
  "—": "---",
  "‘": "`",
  "’": "'",
  "“": "``",
  "”": "''",
  "…": "\\ldots{}",
  "§": "\\S{}",
  "©": "\\copyright{}",
  "⁻": "\\ensuremath{^{-}}",
  ß: "\\ss{}",
  æ: "\\ae{}",
  Æ: "\\AE{}",
  œ: "\\oe{}",
  Œ: "\\OE{}",
  ø: "\\o{}",
  Ø: "\\O{}",
  ł: "\\l{}",
  Ł: "\\L{}",
  ı: "\\i{}",
  ...greek(),
  ...digits("⁰¹²³⁴⁵⁶⁷⁸⁹", "^"),
  ...digits("₀₁₂₃₄₅₆₇₈₉", "_"),
};

/** Accents above and below a letter, as combining characters. */
const ACCENTS: Record<string, string> = {
  "\u0300": "`",
  "\u0301": "'",
  "\u0302": "^",
  "\u0303": "~",
  "\u0304": "=",
  "\u0306": "u",
  "\u0307": ".",
  "\u0308": '"',
  "\u030a": "r",
  "\u030b": "H",
  "\u030c": "v",
  "\u0327": "c",
};

/**
 * A text as TeX prints it in any encoding of fonts: everything that TeX would read as a command
 * escaped, accented letters made of letter and accent. What TeX's own fonts can't print stands as its
 * code point, `[U+6E6F]`, rather than as an error or as nothing.
 */
export function texText(text: string): string {
  const parts: string[] = [];
  for (const character of [...text.normalize("NFC")].flatMap(apart)) {
    const accent = ACCENTS[character];
    const last = parts.at(-1);
    if (accent !== undefined && last !== undefined && /^[A-Za-z]$/.test(last)) {
      parts[parts.length - 1] = `\\${accent}{${last === "i" ? "\\i" : last}}`;
    } else parts.push(texCharacter(character));
  }
  return parts.join("");
}

/** A letter and its accents; a sign that has a command of its own stays whole. */
function apart(character: string): string[] {
  return character in SYMBOLS ? [character] : [...character.normalize("NFD")];
}

function texCharacter(character: string): string {
  const known = COMMANDS[character] ?? SYMBOLS[character];
  if (known !== undefined) return known;
  if (/\s/.test(character)) return " ";
  if (character >= "!" && character <= "~") return character;
  const code = (character.codePointAt(0) as number).toString(16).toUpperCase().padStart(4, "0");
  return `{[}U+${code}{]}`;
}

function greek(): Record<string, string> {
  const small = GREEK.names.split(" ").map((name, index) => {
    const letter = String.fromCodePoint(0x3b1 + index);
    return [letter, name === "omicron" ? "o" : `\\ensuremath{\\${name}}`] as const;
  });
  const names = new Map(small);
  const capitals = Object.keys(GREEK.capitals).map((letter) => {
    const name = names.get(letter.toLowerCase()) as string;
    const first = name.charAt("\\ensuremath{\\".length);
    return [letter, name.replace(`\\${first}`, `\\${first.toUpperCase()}`)] as const;
  });
  return Object.fromEntries([...small, ...capitals]);
}

function digits(characters: string, place: "^" | "_"): Record<string, string> {
  return Object.fromEntries(
    [...characters].map((character, digit) => [character, `\\ensuremath{${place}{${digit}}}`]),
  );
}
