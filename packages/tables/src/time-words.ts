/** What a column's name, or the words in its unit's place, say about its times. */
export type TimeWords = {
  format: "iso" | "jd" | "mjd" | null;
  /** In lower case; null where nothing is said. */
  scale: string | null;
  /** A Julian Date to be added; null: the format's own zero. */
  origin: number | null;
  reference: "barycenter" | "heliocenter" | null;
};

const MJD_ZERO = 2_400_000.5;
const SCALES = ["utc", "ut", "ut1", "tt", "tai", "tdb", "tcb", "tcg", "tdt", "et", "gps", "lst"];
/** Words beside a format or scale that say no more of it (common practice). */
const PLAIN = new Set([
  "obs",
  "observed",
  "observation",
  "mid",
  "time",
  "date",
  "day",
  "days",
  "d",
  "t",
]);
/** Julian Dates by their names in catalogues (common practice): format, what is taken from it, where. */
const FORMATS: Record<string, TimeWords> = {
  iso: words("iso"),
  isot: words("iso"),
  iso8601: words("iso"),
  jd: words("jd"),
  mjd: words("mjd"),
  rjd: words("jd", 2_400_000),
  bjd: words("jd", null, "barycenter"),
  bmjd: words("mjd", null, "barycenter"),
  mbjd: words("mjd", null, "barycenter"),
  btjd: { ...words("jd", 2_457_000, "barycenter"), scale: "tdb" },
  bkjd: { ...words("jd", 2_454_833, "barycenter"), scale: "tdb" },
  hjd: words("jd", null, "heliocenter"),
  hmjd: words("mjd", null, "heliocenter"),
  mhjd: words("mjd", null, "heliocenter"),
};

function words(
  format: TimeWords["format"],
  origin: number | null = null,
  reference: TimeWords["reference"] = null,
): TimeWords {
  return { format, scale: null, origin, reference };
}

/**
 * `MJD`, `JD-2450000`, `BJD_TDB`, `JD (UTC)`, `obs_mjd`, `UTC`: formats, scales and what was taken
 * off, as far as every word in it is known.
 *
 * @returns null for a text that says something else, or nothing of times
 */
export function readTimeWords(text: string): TimeWords | null {
  const [, before = "", offset = "", behind = ""] =
    /^(.*?jd[^\w+−–-]*)[-−–+]\s*(\d{4,7}(?:\.\d+)?)(?!\d)(.*)$/i.exec(text) ?? [];
  const plain = offset === "" ? text : `${before} ${behind}`;
  const said = words(null);
  for (const word of plain.toLowerCase().split(/[^a-z0-9]+/)) {
    if (word === "" || PLAIN.has(word)) continue;
    if (!addWord(said, word)) return null;
  }
  if (said.format === null && said.scale === null && said.reference === null) return null;
  if (offset === "") return said;
  const zero = said.format === "mjd" ? MJD_ZERO : 0;
  return { ...said, origin: Number(offset) + zero };
}

function addWord(said: TimeWords, word: string): boolean {
  const glued = /^(b|h|bm|hm|m)?jd(utc|tdb|tt|tai)$/.exec(word);
  if (glued !== null) return [`${glued[1] ?? ""}jd`, glued[2]!].every((one) => addWord(said, one));
  const format = Object.hasOwn(FORMATS, word) ? FORMATS[word] : undefined;
  if (format !== undefined && said.format === null) {
    Object.assign(said, { ...format, scale: format.scale ?? said.scale });
    return true;
  }
  if (word === "barycentric" || word === "bary") said.reference = "barycenter";
  else if (word === "heliocentric" || word === "helio") said.reference = "heliocenter";
  else if (SCALES.includes(word)) said.scale = word;
  else return false;
  return true;
}
