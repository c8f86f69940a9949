import { partAtDecimal } from "@weighhouse/figures/numbers";
import type { CSSProperties } from "react";

export interface NumProps {
  /** The number as text, formatted by `figures/numbers`; null shows a dash. */
  text: string | null;
  /** JSON Pointer into the standings document; left out for numbers that are not a standing's. */
  at?: string;
  /** The unrounded number: shown on hover, read by checks. */
  exact?: number | null;
  /** Width of the part after the decimal point in characters, one for all of a column. */
  tail?: number;
  /** What a dash means here, for those who hear the page: "no measurement yet". */
  absent?: string;
}

/**
 * A number of the standings document. `data-at` names the place it comes from, so that any number
 * on a page can be held against the document.
 */
export function Num({ text, at, exact, tail, absent }: NumProps) {
  if (text === null) {
    return (
      <span className="num text-quiet" data-at={at}>
        <span aria-hidden="true">–</span>
        <span className="sr-only">{absent ?? "none"}</span>
        {tail ? <span className="num-tail" style={{ minWidth: `${tail}ch` }} /> : null}
      </span>
    );
  }
  const style: CSSProperties | undefined = tail ? { minWidth: `${tail}ch` } : undefined;
  const [head, rest] = partAtDecimal(text);
  return (
    <span
      className="num"
      data-at={at}
      data-exact={exact ?? undefined}
      title={exact === null || exact === undefined ? undefined : String(exact)}
    >
      {head}
      <span className="num-tail" style={style}>
        {rest}
      </span>
    </span>
  );
}

/** The longest part after the decimal point among a column's texts, in characters. */
export function tailOf(texts: readonly (string | null)[]): number {
  return Math.max(0, ...texts.map((text) => (text === null ? 0 : partAtDecimal(text)[1].length)));
}
