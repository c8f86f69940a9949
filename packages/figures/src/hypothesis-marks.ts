import { element, HUES } from "./svg";

/** Shapes in a box of 12 by 12 pixels. */
const PATHS = {
  square: "M1.5 1.5h9v9h-9z",
  round: "M1 6a5 5 0 1 0 10 0a5 5 0 1 0-10 0z",
  up: "M6 .8l5.4 10.2H.6z",
  lozenge: "M6 .3L11.7 6 6 11.7.3 6z",
  cross: "M4.2.6h3.6v3.6h3.6v3.6H7.8v3.6H4.2V7.8H.6V4.2h3.6z",
} as const;
const SHAPES = ["square", "round", "up", "lozenge", "cross"] as const;
/** null is an unbroken line. */
const DASHES = [null, "8 3", "3 3", "9 3 2 3", "1 3", "12 4 4 4", "2 6"] as const;

/** Ink, shape and dash of a hypothesis by its place in the document: forty differ, in grey too. */
export type HypothesisMark = {
  /** 1 to 8: `ink3`, `fill3` in figures, `--h3` on pages. */
  hue: number;
  shape: (typeof SHAPES)[number];
  /** The shape in a box of 12 by 12. */
  path: string;
  dash: string | null;
};

export function hypothesisMark(index: number): HypothesisMark {
  const place = Math.max(0, index);
  const shape = SHAPES[place % SHAPES.length] ?? "square";
  return {
    hue: (place % HUES.length) + 1,
    shape,
    path: PATHS[shape],
    dash: DASHES[place % DASHES.length] ?? null,
  };
}

/** The mark around a point, `size` pixels across. */
export function markElement(mark: HypothesisMark, x: number, y: number, size = 11): string {
  const scale = size / 12;
  const corner = `translate(${(x - size / 2).toFixed(2)} ${(y - size / 2).toFixed(2)})`;
  return element("path", {
    d: mark.path,
    transform: `${corner} scale(${scale.toFixed(3)})`,
    class: `fill${mark.hue}`,
  });
}
