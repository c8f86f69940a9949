import type { ReactNode } from "react";

/**
 * A table that fits any width. Below its `stackBelow` (narrow: 640 px, middle: 900, broad: 1100, wide: 1320) rows turn
 * into small sheets whose cells say their column; give each cell a `data-label` for that.
 */
export function Table(props: {
  caption: string;
  head: ReactNode;
  children: ReactNode;
  stackBelow?: "narrow" | "middle" | "broad" | "wide" | "always";
  /** Short cells, two to a line where rows are stacked; `data-whole` gives one a line of its own. */
  paired?: boolean;
}) {
  return (
    <table className="table" data-stack={props.stackBelow ?? "narrow"} data-paired={props.paired}>
      <caption className="sr-only">{props.caption}</caption>
      <thead>{props.head}</thead>
      <tbody>{props.children}</tbody>
    </table>
  );
}
