import { ApiError } from "./api-error";

/** A media type without its parameters, in lower case (RFC 9110, 8.3.1). */
export function mediaType(field: string | null): string {
  return (field ?? "").split(";")[0]!.trim().toLowerCase();
}

/**
 * Which of the types that a route gives a client likes best, by its Accept (RFC 9110, 12.5.1): the
 * most exact range that fits a type says how much; of equals the one declared first.
 *
 * @throws {ApiError} `not-acceptable` where it wants none of them
 */
export function chooseType(accept: string | null, given: string[]): string {
  const [first] = given;
  if (first === undefined || accept === null || accept.trim() === "") return first ?? "";
  const ranges = accept.split(",").map(readRange);
  let best = { type: "", quality: 0 };
  for (const type of given) {
    const quality = qualityOf(type, ranges);
    if (quality > best.quality) best = { type, quality };
  }
  if (best.type !== "") return best.type;
  throw new ApiError(
    "not-acceptable",
    `found Accept: ${accept.slice(0, 200)}; allowed ${given.join(", ")}`,
  );
}

type Range = { type: string; quality: number };

function readRange(text: string): Range {
  const [type = "", ...parameters] = text.split(";").map((part) => part.trim().toLowerCase());
  const weight = parameters.find((parameter) => parameter.startsWith("q="))?.slice(2) ?? "1";
  // A weight that is none (RFC 9110, 12.4.2) asks for nothing.
  return { type, quality: /^(0(\.\d{0,3})?|1(\.0{0,3})?)$/.test(weight) ? Number(weight) : 0 };
}

function qualityOf(type: string, ranges: Range[]): number {
  const [family] = type.split("/");
  for (const exact of [type, `${family}/*`, "*/*"]) {
    const fitting = ranges.filter((range) => range.type === exact);
    if (fitting.length > 0) return Math.max(...fitting.map(({ quality }) => quality));
  }
  return 0;
}
