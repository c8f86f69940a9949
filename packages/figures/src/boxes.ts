/** A rectangle in pixels, y downward. */
export type Box = { x: number; y: number; width: number; height: number };
export type Point = { x: number; y: number };

/** A line of text: `x`, `y` is the start of its baseline; `box` holds all of it. */
export type PlacedText = {
  text: string;
  x: number;
  y: number;
  box: Box;
  fontSize: number;
  bold: boolean;
};

/** Whether two boxes share more than an edge. */
export function overlap(a: Box, b: Box): boolean {
  const slack = 1e-6;
  return (
    a.x + a.width > b.x + slack &&
    b.x + b.width > a.x + slack &&
    a.y + a.height > b.y + slack &&
    b.y + b.height > a.y + slack
  );
}

/** Moves a stretch of the given length into [from, to] where it fits; else to `from`. */
export function clampInto(start: number, length: number, [from, to]: [number, number]): number {
  return Math.max(from, Math.min(start, to - length));
}
