import { element, HUES } from "./svg";

/** Ink, shape and dash of a hypothesis by its place in the document: forty differ, in grey too. */
export type HypothesisMark = {
  /** 1 to 8: `ink3`, `fill3` in figures, `--h3` on pages. */
  hue: number;
  shape: (typeof SHAPES)[number];
  dash: (typeof DASHES)[number];
};

const SHAPES = ["square", "round", "up", "lozenge", "cross"] as const;
/** null is an unbroken line. */
const DASHES = [null, "8 3", "3 3", "9 3 2 3", "1 3", "12 4 4 4", "2 6"] as const;

export function hypothesisMark(index: number): HypothesisMark {
  const place = Math.max(0, index);
  return {
    hue: (place % HUES.length) + 1,
    shape: SHAPES[place % SHAPES.length] ?? "square",
    dash: DASHES[place % DASHES.length] ?? null,
  };
}

/** The mark around a point, `size` pixels across. */
export function markElement(mark: HypothesisMark, x: number, y: number, size = 11): string {
  const r = size / 2;
  const style = { class: `fill${mark.hue}` };
  if (mark.shape === "round") return element("circle", { cx: x, cy: y, r: r * 0.95, ...style });
  if (mark.shape === "square") {
    const side = size * 0.84;
    return element("rect", {
      x: x - side / 2,
      y: y - side / 2,
      width: side,
      height: side,
      ...style,
    });
  }
  const third = r / 3;
  const paths = {
    up: [
      [0, -r],
      [r, r * 0.85],
      [-r, r * 0.85],
    ],
    lozenge: [
      [0, -r],
      [r, 0],
      [0, r],
      [-r, 0],
    ],
    cross: [
      [-third, -r],
      [third, -r],
      [third, -third],
      [r, -third],
      [r, third],
      [third, third],
      [third, r],
      [-third, r],
      [-third, third],
      [-r, third],
      [-r, -third],
      [-third, -third],
    ],
  }[mark.shape] as [number, number][];
  const points = paths.map(([dx, dy]) => `${(x + dx).toFixed(2)},${(y + dy).toFixed(2)}`);
  return element("polygon", { points: points.join(" "), ...style });
}
