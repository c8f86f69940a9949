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
export type Label = {
  width: number;
  height: number;
  /** `row` from the top; `dx` from the label's inner left edge. */
  lines: { text: string; bold: boolean; row: number; dx: number }[];
};

/**
 * The lines of a label: the title in at most two, then number and note in as many as they need,
 * since a number is never cut.
 */
export function composeLabel(item: BeamItem, width: number, style: LabelStyle): Label {
  const inner = width - 2 * style.padding;
  const { measure, fontSize } = style;
  const titles = wrapText(item.title, inner, { measure, fontSize, bold: true, maxLines: 2 });
  const remarks = wrapText(remarkOf(item), inner, { measure, fontSize, bold: false });
  const lines = [
    ...titles.map((text) => ({ text, bold: true })),
    ...remarks.map((text) => ({ text, bold: false })),
  ].map((line, row) => ({ ...line, row, dx: 0 }));
  const widest = Math.max(...lines.map(({ text, bold }) => measure(text, fontSize, bold)));
  return {
    lines,
    width: Math.min(width, Math.ceil(widest) + 2 * style.padding),
    height: lines.length * style.lineHeight + style.padding,
  };
}

/** The whole label on one line, for when many hang close together; only the title is cut. */
export function composeFlatLabel(item: BeamItem, width: number, style: LabelStyle): Label {
  const { measure, fontSize, padding, lineHeight } = style;
  const gap = fontSize * 0.6;
  const remark = remarkOf(item);
  const remarkWidth = measure(remark, fontSize, false);
  const room = width - 2 * padding - gap - remarkWidth;
  const titles = wrapText(item.title, room, { measure, fontSize, bold: true, maxLines: 1 });
  const title = titles[0] ?? "";
  const titleWidth = measure(title, fontSize, true);
  if (titleWidth > room) return composeLabel(item, width, style);
  const dx = title === "" ? 0 : titleWidth + gap;
  return {
    lines: [
      { text: title, bold: true, row: 0, dx: 0 },
      { text: remark, bold: false, row: 0, dx },
    ],
    width: Math.ceil(dx + remarkWidth) + 2 * padding,
    height: lineHeight + padding,
  };
}

function remarkOf(item: BeamItem): string {
  return item.note === null ? item.number : `${item.number}, ${item.note}`;
}

/** Puts a label's lines into a box of its size at the given corner. */
export function placeLabel(
  label: Label,
  corner: { x: number; y: number },
  style: LabelStyle,
): { box: Box; lines: PlacedText[] } {
  const box = { ...corner, width: label.width, height: label.height };
  const lines = label.lines.map((line) =>
    placeText(line.text, {
      x: corner.x + style.padding + line.dx,
      top: corner.y + style.padding / 2 + line.row * style.lineHeight,
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
