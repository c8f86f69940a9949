import { hypothesisMark } from "@weighhouse/figures/hypothesis-marks";
import type { HypothesisMark as Mark } from "@weighhouse/figures/hypothesis-marks";

/** The colour of a hypothesis by its place in the document. */
export function inkOf(index: number): string {
  return `var(--h${hypothesisMark(index).hue})`;
}

/** The dash of its line in a chart; undefined is unbroken. */
export function dashOf(index: number): string | undefined {
  return hypothesisMark(index).dash ?? undefined;
}

const shapes: Record<Mark["shape"], React.ReactNode> = {
  square: <rect x="1.5" y="1.5" width="9" height="9" />,
  round: <circle cx="6" cy="6" r="5" />,
  up: <path d="M6 .8l5.4 10.2H.6z" />,
  lozenge: <path d="M6 .3L11.7 6 6 11.7.3 6z" />,
  cross: <path d="M4.2.6h3.6v3.6h3.6v3.6H7.8v3.6H4.2V7.8H.6V4.2h3.6z" />,
};

/** The small mark before a hypothesis's name: no two of forty are alike, in grey too. */
export function HypothesisMark({ index }: { index: number }) {
  return (
    <svg
      viewBox="0 0 12 12"
      width="11"
      height="11"
      aria-hidden="true"
      className="mr-2 inline-block flex-none"
      fill={inkOf(index)}
    >
      {shapes[hypothesisMark(index).shape]}
    </svg>
  );
}
