import { partAtDecimal } from "@weighhouse/figures/numbers";
import { widthOf } from "../terminal";

export type TableColumn = {
  title: string;
  /** `decimal`: numbers stand with their decimal points below one another. */
  align: "left" | "right" | "decimal";
  cells: string[];
  /** Puts a style on a cell after it has its width. */
  paint?: (padded: string, row: number) => string;
};

const GAP = "  ";

/** Columns side by side, as lines without trailing spaces. */
export function tableLines(columns: TableColumn[], paintHead: (text: string) => string): string[] {
  const set = columns.map(setColumn);
  const rows = set[0]?.cells.length ?? 0;
  const line = (cells: string[]) => cells.join(GAP).trimEnd();
  return [
    paintHead(line(set.map(({ head }) => head))),
    ...Array.from({ length: rows }, (_, row) =>
      line(set.map(({ cells, paint }) => paint?.(cells[row] ?? "", row) ?? cells[row] ?? "")),
    ),
  ];
}

/** Columns that the table takes. */
export function tableWidth(columns: TableColumn[]): number {
  const widths = columns.map((column) => widthOf(setColumn(column).head));
  return widths.reduce((sum, width) => sum + width, 0) + GAP.length * (columns.length - 1);
}

function setColumn({ title, align, cells, paint }: TableColumn) {
  const aligned = align === "decimal" ? alignDecimals(cells) : cells;
  const width = Math.max(widthOf(title), ...aligned.map(widthOf));
  const pad = (text: string) => {
    const space = " ".repeat(width - widthOf(text));
    return align === "left" ? text + space : space + text;
  };
  return { head: pad(title), cells: aligned.map(pad), paint };
}

function alignDecimals(cells: string[]): string[] {
  const parts = cells.map(partAtDecimal);
  const before = Math.max(0, ...parts.map(([whole]) => widthOf(whole)));
  const after = Math.max(0, ...parts.map(([, rest]) => widthOf(rest)));
  return parts.map(
    ([whole, rest]) =>
      " ".repeat(before - widthOf(whole)) + whole + rest + " ".repeat(after - widthOf(rest)),
  );
}
