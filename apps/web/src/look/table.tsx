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
}) {
  return (
    <table className="table" data-stack={props.stackBelow ?? "narrow"}>
      <caption className="sr-only">{props.caption}</caption>
      <thead>{props.head}</thead>
      <tbody>{props.children}</tbody>
    </table>
  );
}
