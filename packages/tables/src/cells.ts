const NUMBERS = new Set([
  "value",
  "sd",
  "sdDex",
  "plus",
  "minus",
  "confidence",
  "sigmas",
  "efficiency",
  "falseAlarm",
  "count",
  "exposure",
  "background",
]);
const TIMES = new Set(["observedAt", "knownSince"]);
const NUMBER = /^[+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?$/;
const YES = /^(?:yes|y|true)$/i;
const NO = /^(?:no|n|false)$/i;

/**
 * A cell's text as its field's type. What can't be read as that stays text, so that the schema
 * refuses it in its own words and shows what was found.
 */
export function cellValue(field: string, text: string): unknown {
  if (NUMBERS.has(field) || field.startsWith("conditions.")) return readNumber(text);
  if (TIMES.has(field)) return readTime(text);
  if (field === "occurred") return YES.test(text) ? true : NO.test(text) ? false : text;
  if (field === "shared") return readShared(text);
  if (field === "setAside") return { reason: text };
  return text;
}

/** A cell that belongs to no field: a number where it reads back as the same text, else text. */
export function extraValue(text: string): string | number {
  const number = Number(text);
  return text !== "" && Number.isFinite(number) && String(number) === text ? number : text;
}

/** A number in ASCII digits, or with a typographic minus; nothing that two readers could read two ways. */
function readNumber(text: string): number | string {
  const ascii = text.replace(/^\u2212/, "-");
  const number = Number(ascii);
  return NUMBER.test(ascii) && Number.isFinite(number) ? number : text;
}

/**
 * An RFC 3339 time in UTC. A space for the T, missing seconds and another offset are taken; a time
 * without any zone is not, since nothing says that it is UTC.
 */
export function readTime(text: string): string {
  const match =
    /^(\d{4}-\d{2}-\d{2})[Tt ](\d{2}:\d{2})(:\d{2})?(\.\d{1,9})?\s*(Z|z|UTC|[+-]\d{2}:\d{2})$/.exec(
      text,
    );
  if (match === null) return text;
  const [, day = "", clock = "", seconds = ":00", fraction = "", zone = "Z"] = match;
  if (!/^[+-]/.test(zone)) return `${day}T${clock}${seconds}${fraction}Z`;
  const at = new Date(`${day}T${clock}${seconds}${zone}`);
  if (Number.isNaN(at.getTime())) return text;
  return `${at.toISOString().slice(0, 19)}${fraction}Z`;
}

/** `zero-point:1; flux:0.5`; a coefficient of 1 may be left out. */
function readShared(text: string): unknown {
  return text
    .split(";")
    .map((part) => part.trim())
    .filter((part) => part !== "")
    .map((part) => {
      const at = part.lastIndexOf(":");
      if (at === -1) return { error: part };
      return {
        error: part.slice(0, at).trim(),
        coefficient: readNumber(part.slice(at + 1).trim()),
      };
    });
}
