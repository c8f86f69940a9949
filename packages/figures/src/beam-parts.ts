import { placeText, type LabelStyle } from "./beam-labels";
import type { BeamPlan } from "./beam";
import { KASS_RAFTERY, type BeamScale } from "./beam-scale";
import { MINUS } from "./numbers";
import { wrapText } from "./text-width";
import type { Box, PlacedText } from "./boxes";

export const BEAM_PX = 7;
export const SPOT_PX = 15;
const LEAST_SPOT_PX = 5;

/** The stretch of the beam that a value and its uncertainty cover, as distances from the near end. */
export function spotStretch(
  item: BeamPlan["items"][number],
  scale: BeamScale,
  lengthPx: number,
): { at: number; from: number; to: number } {
  const value = item.log10BayesFactor;
  const at = scale.at(value);
  if (value === null) return { at, from: at - LEAST_SPOT_PX, to: at };
  const from = Math.min(scale.at(value + item.error), at - LEAST_SPOT_PX / 2);
  const to = Math.max(scale.at(value - item.error), at + LEAST_SPOT_PX / 2);
  return { at, from: Math.max(from, 0), to: Math.min(to, lengthPx) };
}

/** The categories as distances from the near end, each to the next one's beginning. */
export function categoryStretches(scale: BeamScale) {
  return KASS_RAFTERY.map(({ from, words }, index) => ({
    from,
    words,
    near: scale.at(-from),
    far: scale.at(-(KASS_RAFTERY[index + 1]?.from ?? scale.reach)),
  }));
}

/** What the axis is and whose words stand at it; with the bounds where the bands have no room. */
export function legendLines(
  wordsInBands: boolean,
  frame: { x: number; top: number; width: number },
  style: LabelStyle,
): PlacedText[] {
  const axis = "log₁₀ Bayes factor against the leader";
  const words = wordsInBands
    ? "words from Kass & Raftery 1995"
    : `below ${MINUS}0.5 substantial, below ${MINUS}1 strong, below ${MINUS}2 decisive (Kass & Raftery 1995)`;
  const { measure, fontSize } = style;
  return wrapText(`${axis}; ${words}`, frame.width, { measure, fontSize, bold: false }).map(
    (text, index) =>
      placeText(text, { x: frame.x, top: frame.top + index * style.lineHeight, style }),
  );
}

/** The statement's lines within a width, from its top left corner. */
export function statementBlock(
  frame: { x: number; top: number; width: number },
  style: LabelStyle,
): { box: Box; lines: PlacedText[] } {
  const { measure, fontSize, padding, lineHeight } = style;
  const text = "No hypothesis describes the data: each has p < 0.001";
  const texts = wrapText(text, frame.width - 2 * padding, { measure, fontSize, bold: true });
  const lines = texts.map((line, index) =>
    placeText(line, {
      x: frame.x + padding,
      top: frame.top + padding / 2 + index * lineHeight,
      bold: true,
      style,
    }),
  );
  const widest = Math.max(...lines.map((line) => line.box.width));
  return {
    box: {
      x: frame.x,
      y: frame.top,
      width: widest + 2 * padding,
      height: texts.length * lineHeight + padding,
    },
    lines,
  };
}
