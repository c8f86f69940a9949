/** Width of a text in pixels, never less than what is drawn. */
export type MeasureText = (text: string, fontSize: number, bold: boolean) => number;

const NARROW = /[ijlI.,:;'|!()[\]`f t\u00a0]/;
const WIDE = /[mwMWOQG@%&—…\u221e]/;
const CAPITAL = /[A-ZΑ-ΩА-Я0-9±×+−–<>=]/;
const FULL = /[\u1100-\u115f\u2e80-\ua4cf\uac00-\ud7a3\uf900-\ufaff\ufe30-\ufe6f\uff00-\uff60]/;
const MARK = /\p{M}/u;
const PICTURE = /\p{Extended_Pictographic}/u;

/**
 * A cautious estimate for sans-serif type: per-character widths at or above those of IBM Plex Sans
 * and of the usual system fonts, since an archive's figure is drawn with whatever is at hand.
 */
export const estimateTextWidth: MeasureText = (text, fontSize, bold) => {
  let ems = 0;
  for (const character of text) ems += widthInEms(character);
  return ems * fontSize * (bold ? 1.07 : 1);
};

/**
 * Breaks a text into lines no wider than `width`, at spaces, and inside a word only where it is too
 * long by itself. What exceeds `maxLines` is cut with an ellipsis.
 */
export function wrapText(
  text: string,
  width: number,
  style: { measure: MeasureText; fontSize: number; bold: boolean; maxLines?: number },
): string[] {
  const fits = (line: string) => style.measure(line, style.fontSize, style.bold) <= width;
  const lines: string[] = [];
  let line = "";
  for (const word of text.split(" ").filter((word) => word !== "")) {
    const longer = line === "" ? word : `${line} ${word}`;
    if (fits(longer)) {
      line = longer;
      continue;
    }
    if (line !== "") lines.push(line);
    const pieces = breakWord(word, fits);
    lines.push(...pieces.slice(0, -1));
    line = pieces.at(-1) ?? "";
  }
  if (line !== "") lines.push(line);
  const most = style.maxLines ?? Infinity;
  if (lines.length <= most) return lines;
  const rest = lines.slice(most - 1).join(" ");
  return [...lines.slice(0, most - 1), elide(rest, fits)];
}

function elide(text: string, fits: (line: string) => boolean): string {
  const characters = [...text];
  while (characters.length > 0 && !fits(`${characters.join("").trimEnd()}…`)) characters.pop();
  return `${characters.join("").trimEnd()}…`;
}

function breakWord(word: string, fits: (line: string) => boolean): string[] {
  const pieces: string[] = [];
  let piece = "";
  for (const character of word) {
    if (piece !== "" && !fits(piece + character)) {
      pieces.push(piece);
      piece = "";
    }
    piece += character;
  }
  return [...pieces, piece];
}

function widthInEms(character: string): number {
  if (MARK.test(character)) return 0;
  if (PICTURE.test(character)) return 1.4;
  if (FULL.test(character)) return 1.02;
  if (WIDE.test(character)) return 1;
  if (NARROW.test(character)) return 0.4;
  if (CAPITAL.test(character)) return 0.74;
  return character.charCodeAt(0) < 0x250 ? 0.63 : 0.8;
}
