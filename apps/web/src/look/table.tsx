import type { ReactNode } from "react";

/**
 * A table that fits any width: `stacked` turns rows into small sheets below 640 px (give each cell
 * a `data-label`), `pinned` keeps the first column while the rest moves sideways.
 */
export function Table(props: {
  caption: string;
  head: ReactNode;
  children: ReactNode;
  narrow?: "stacked" | "pinned";
  foot?: ReactNode;
}) {
  const narrow = props.narrow ?? "stacked";
  const scrolls = narrow === "pinned";
  return (
    <div
      className="table-frame"
      // A frame that scrolls must be reachable by keyboard (WCAG 2.1.1).
      {...(scrolls ? { tabIndex: 0, role: "region", "aria-label": props.caption } : {})}
    >
      <table
        className="table"
        data-stacked={narrow === "stacked" ? "" : undefined}
        data-pinned={narrow === "pinned" ? "" : undefined}
      >
        <caption className="sr-only">{props.caption}</caption>
        <thead>{props.head}</thead>
        <tbody>{props.children}</tbody>
        {props.foot ? <tfoot>{props.foot}</tfoot> : null}
      </table>
    </div>
  );
}
