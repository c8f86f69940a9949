import { plainName } from "./field-names";

/** A declared part's key, from a cell with its key or its title where that is one part's only; else the cell's text. */
export function keyOf(
  parts: readonly { key: string; title: string | null }[],
  text: string,
): string {
  if (parts.some(({ key }) => key === text)) return text;
  const named = parts.filter(({ key, title }) =>
    [key, title ?? ""].some((one) => plainName(one) === plainName(text)),
  );
  return named.length === 1 ? named[0]!.key : text;
}
