import { styleText } from "node:util";
import { eastAsianWidth } from "get-east-asian-width";

type Style = Parameters<typeof styleText>[0];

/** What a report is written for: how wide, and whether styles are seen. */
export type Terminal = {
  columns: number;
  /** Where sentences wrap: in a pipe nowhere, so that a finding stays on its line. */
  proseColumns: number;
  style(style: Style, text: string): string;
};

const COLUMNS_IN_A_FILE = 120;

export function terminalOf(stream: NodeJS.WriteStream): Terminal {
  const wanted = Number(process.env.COLUMNS);
  const known = stream.columns ?? (wanted > 0 ? wanted : null);
  const colour = hasColour(stream);
  return {
    columns: known ?? COLUMNS_IN_A_FILE,
    proseColumns: known ?? Infinity,
    style: (style, text) => (colour ? styleText(style, text) : text),
  };
}

/** NO_COLOR set to anything, a dumb terminal or a pipe: no colour. */
export function hasColour(stream: NodeJS.WriteStream): boolean {
  return stream.isTTY === true && !process.env.NO_COLOR && process.env.TERM !== "dumb";
}

/** Columns that a text without control characters takes on a terminal. */
export function widthOf(text: string): number {
  let columns = 0;
  for (const character of text) {
    if (!/\p{M}/u.test(character)) columns += eastAsianWidth(character.codePointAt(0) ?? 0);
  }
  return columns;
}

/** Text from a document as one line that can't steer the terminal. */
export function harmless(text: string): string {
  return text.replaceAll(/[\p{Cc}\p{Cf}\p{Zl}\p{Zp}]+/gu, " ").trim();
}

/** Cuts a text to a width, with an ellipsis. */
export function cut(text: string, columns: number): string {
  if (widthOf(text) <= columns) return text;
  let kept = "";
  for (const { segment } of new Intl.Segmenter("en").segment(text)) {
    if (widthOf(kept + segment) > columns - 1) break;
    kept += segment;
  }
  return `${kept.trimEnd()}…`;
}

/** Breaks a text at spaces into lines of at most `columns`; what it begins with stays, later lines take `indent`. */
export function wrap(text: string, columns: number, indent = ""): string {
  const lines: string[] = [];
  let line = /^ */.exec(text)?.[0] ?? "";
  for (const word of text.trim().split(" ")) {
    const longer = line.trim() === "" ? line + word : `${line} ${word}`;
    if (line.trim() !== "" && widthOf(longer) > columns) {
      lines.push(line);
      line = indent + word;
    } else {
      line = longer;
    }
  }
  return [...lines, line].join("\n");
}
