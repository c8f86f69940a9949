import type { Box, PlacedText } from "./boxes";
import { estimateTextWidth, wrapText, type MeasureText } from "./text-width";

/** One thing that hangs on the beam. */
export type BeamItem = {
  key: string;
  title: string;
  /** Against the leader: 0 for it, negative below; null for a likelihood of zero. */
  log10BayesFactor: number | null;
  /** Standard error of that log10, 0 for closed forms. */
  error: number;
  /** What the label says of it: `leads`, `−0.80`. */
  number: string;
  /** A short remark after the number: `silent on 4`. */
  note: string | null;
  role: "hypothesis" | "no-model";
};

/** Sizes in pixels, and how wide a text is. */
export type LabelStyle = {
  fontSize: number;
  lineHeight: number;
  padding: number;
  measure: MeasureText;
};

export const LABEL_STYLE: LabelStyle = {
  fontSize: 13,
  lineHeight: 17,
  padding: 7,
  measure: estimateTextWidth,
};

/** A label's lines before it has a place: its own box starts at 0, 0. */
export type Label = { width: number; height: number; lines: { text: string; bold: boolean }[] };

/**
 * The lines of a label: the title in at most two, then number and note in as many as they need,
 * since a number is never cut.
 */
export function composeLabel(item: BeamItem, width: number, style: LabelStyle): Label {
  const inner = width - 2 * style.padding;
  const { measure, fontSize } = style;
  const remark = item.note === null ? item.number : `${item.number}, ${item.note}`;
  const lines = [
    ...wrapText(item.title, inner, { measure, fontSize, bold: true, maxLines: 2 }).map((text) => ({
      text,
      bold: true,
    })),
    ...wrapText(remark, inner, { measure, fontSize, bold: false }).map((text) => ({
      text,
      bold: false,
    })),
  ];
  const widest = Math.max(...lines.map((line) => measure(line.text, fontSize, line.bold)));
  return {
    lines,
    width: Math.min(width, Math.ceil(widest) + 2 * style.padding),
    height: lines.length * style.lineHeight + style.padding,
  };
}

/** Puts a label's lines into a box of its size at the given corner. */
export function placeLabel(
  label: Label,
  corner: { x: number; y: number },
  style: LabelStyle,
): { box: Box; lines: PlacedText[] } {
  const box = { ...corner, width: label.width, height: label.height };
  const lines = label.lines.map((line, index) =>
    placeText(line.text, {
      x: corner.x + style.padding,
      top: corner.y + style.padding / 2 + index * style.lineHeight,
      bold: line.bold,
      style,
    }),
  );
  return { box, lines };
}

/** A line of text whose box is `lineHeight` tall and starts at `x`, `top`. */
export function placeText(
  text: string,
  at: { x: number; top: number; bold?: boolean; style: LabelStyle },
): PlacedText {
  const { fontSize, lineHeight, measure } = at.style;
  const bold = at.bold ?? false;
  return {
    text,
    x: at.x,
    y: at.top + lineHeight * 0.74,
    box: { x: at.x, y: at.top, width: measure(text, fontSize, bold), height: lineHeight },
    fontSize,
    bold,
  };
}
