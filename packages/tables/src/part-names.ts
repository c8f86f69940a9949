import { signsInWords } from "./field-names";

/**
 * Columns named for another one: its uncertainty, its limit flag, and so on. `stem` is the other's
 * name ("" where none is said), to be compared without case and separators.
 */
export type PartName = { role: string; stem: string; letter: "E" | "e" | null };

const ERR = "(?:err|error|sigma|sig|std|stddev|stdev|unc|uncertainty|sd|e)";
const UP = "(?:up|upp|upper|plus|hi|high|pos)";
const LOW = "(?:lo|low|lower|minus|down|dn|neg)";

/** The forms of common practice, on names in small letters with underscores between words. */
const FORMS: readonly (readonly [RegExp, string])[] = [
  ...both(UP, "plus"),
  ...both(LOW, "minus"),
  [/^(?:sd_dex|err_dex)$/, "sdDex"],
  [/^(?:sd_dex|err_dex)_(.+)$/, "sdDex"],
  [/^(.+)_(?:sd_dex|err_dex)$/, "sdDex"],
  [new RegExp(`^${ERR}_(.+)$`), "sd"],
  [new RegExp(`^(.+)_${ERR}$`), "sd"],
  [/^(?:is_)?(?:upper_?lim(?:it)?|up_?lim|ul)$/, "upperLimit"],
  [/^(.+)_(?:is_)?(?:upper_?lim(?:it)?|up_?lim|ul)$/, "upperLimit"],
  [/^(?:upper_?lim(?:it)?|up_?lim|ul)_(.+)$/, "upperLimit"],
  [/^(?:is_)?(?:lower_?lim(?:it)?|lo_?lim|ll)$/, "lowerLimit"],
  [/^(.+)_(?:is_)?(?:lower_?lim(?:it)?|lo_?lim|ll)$/, "lowerLimit"],
  [/^(?:lower_?lim(?:it)?|lo_?lim|ll)_(.+)$/, "lowerLimit"],
  [/^(?:l|lim|limit|limit_flag|lim_flag|flag)_(.+)$/, "limit"],
  [/^(.+)_(?:lim|limit|limit_flag|lim_flag|flag)$/, "limit"],
  [/^(?:lim|limit_flag|lim_flag|flag)$/, "limit"],
  [/^(.+)_(?:confidence|conf|cl)$/, "confidence"],
  [/^(?:confidence|conf|cl)_(.+)$/, "confidence"],
  [/^(.+)_(?:n_?sigmas?|sigmas)$/, "sigmas"],
  [/^(?:n_?sigmas?|sigmas)_(.+)$/, "sigmas"],
  [/^(.+)_false_?alarm$/, "falseAlarm"],
  [/^(.+)_set_?aside$/, "setAside"],
  ...["unit", "status", "source", "noise", "exposure", "background", "efficiency"].map(
    (role) => [new RegExp(`^(.+)_${role}$`), role] as const,
  ),
  [/^(.+?)(?:err|error|unc|sigma)$/, "sd"],
];

function both(side: string, role: string): [RegExp, string][] {
  const pairs = [`${ERR}_?${side}`, `${side}_?${ERR}`];
  return pairs
    .flatMap((pair): [RegExp, string][] => [
      [new RegExp(`^${pair}$`), role],
      [new RegExp(`^${pair}_(.+)$`), role],
      [new RegExp(`^(.+?)_?${pair}$`), role],
    ])
    .concat([
      [new RegExp(`^(.+)_${side === UP ? "plus" : "minus"}$`), role],
      [new RegExp(`^${side === UP ? "plus" : "minus"}_(.+)$`), role],
    ]);
}

/** What a name may be a part of, the likeliest first; a stem that is no column's name means nothing. */
export function partNames(name: string): PartName[] {
  const [first] = name;
  const letter = /^[eE]_/.test(name) && (first === "E" || first === "e") ? first : null;
  const words = inWords(name);
  return FORMS.flatMap(([form, role]) => {
    const match = form.exec(words);
    if (match === null) return [];
    const own = role === "sd" && words.startsWith("e_") ? letter : null;
    return [{ role, stem: match[1] ?? "", letter: own }];
  });
}

/** `fluxErr`, `flux err`, `flux.err` and `FLUX_ERR` as flux_err; a sign at an end is a word. */
function inWords(name: string): string {
  return signsInWords(name)
    .replace(/^σ[\s_]*/, "sigma_")
    .replaceAll(/([a-z\d])([A-Z])/g, "$1_$2")
    .replaceAll(/[\s.\-/()[\]]+/g, "_")
    .replaceAll(/_+/g, "_")
    .replaceAll(/^_|_$/g, "")
    .toLowerCase();
}
