import type { VerdictRow } from "@weighhouse/campaign/standings";
import { LABEL_STYLE, placeText } from "./beam-labels";
import { formatTension } from "./standing-numbers";
import { element, figure, textElement } from "./svg";
import { estimateTextWidth, wrapText } from "./text-width";
import { VERDICT_MARKS, VERDICT_WORDS } from "./verdict-marks";

export type GridInput = {
  /** In window order, each with what was measured in all: `8.10 ± 0.60 kg/s`. */
  measurands: { key: string; title: string; measured: string }[];
  /** In the order of rank. */
  hypotheses: { key: string; title: string }[];
  verdicts: VerdictRow[];
};

const MARGIN = 8;
const GAP = 14;
const { fontSize, lineHeight } = LABEL_STYLE;
const TITLE_WIDTH = 200;
const CELL_WIDTH = 142;
const TENSION_WIDTH = 46;

type Cell = { verdict: VerdictRow | null };

/**
 * The verdicts, measurands by hypotheses: in each cell the tension in sigma, the verdict's mark and its
 * word. As wide as it needs; where that is more than `widthPx`, each measurand takes several rows.
 */
export function gridSvg(input: GridInput, options: { widthPx: number }): string {
  const wide = 2 * MARGIN + 2 * (TITLE_WIDTH + GAP) + input.hypotheses.length * CELL_WIDTH;
  const rows = rowsOf(input);
  const drawn =
    wide <= options.widthPx ? drawGrid(input, rows) : drawStacked(input, rows, options.widthPx);
  const note = lateNote(input.verdicts, drawn.height);
  return figure(
    {
      id: "grid",
      title: "Verdicts by measurand and hypothesis, tension in sigma first",
      description: gridInWords(input, rows),
      width: wide <= options.widthPx ? wide : Math.max(options.widthPx, 240),
      height: drawn.height + (note.length > 0 ? lineHeight : 0),
    },
    [...drawn.body, ...note],
  );
}

/** What the asterisk means, where there is one. */
function lateNote(verdicts: VerdictRow[], top: number): string[] {
  if (!verdicts.some(({ order }) => order === "after")) return [];
  return block(["* filed after data: not counted"], MARGIN, top - MARGIN, false, "quiet");
}

function rowsOf({ measurands, hypotheses, verdicts }: GridInput): Cell[][] {
  const found = new Map(verdicts.map((row) => [`${row.measurand} ${row.hypothesis}`, row]));
  return measurands.map(({ key }) =>
    hypotheses.map((hypothesis) => ({ verdict: found.get(`${key} ${hypothesis.key}`) ?? null })),
  );
}

function drawGrid(input: GridInput, rows: Cell[][]) {
  const body: string[] = [];
  const cellX = (column: number) => MARGIN + 2 * (TITLE_WIDTH + GAP) + column * CELL_WIDTH;
  const heads = input.hypotheses.map(({ title }) => lines(title, CELL_WIDTH - GAP, 3));
  let y = MARGIN;
  heads.forEach((head, column) => body.push(...block(head, cellX(column), y, true)));
  y += Math.max(1, ...heads.map((head) => head.length)) * lineHeight + 4;
  input.measurands.forEach(({ title, measured }, row) => {
    const [name, value] = [lines(title, TITLE_WIDTH, 3), lines(measured, TITLE_WIDTH, 3)];
    const height = Math.max(name.length, value.length) * lineHeight + 8;
    const right = cellX(input.hypotheses.length);
    body.push(element("line", { x1: MARGIN, y1: y, x2: right, y2: y, class: "rule" }));
    body.push(...block(name, MARGIN, y + 4, false));
    body.push(...block(value, MARGIN + TITLE_WIDTH + GAP, y + 4, false, "quiet"));
    rows[row]?.forEach((cell, column) => body.push(...drawCell(cell, cellX(column), y + 4)));
    y += height;
  });
  return { body, height: y + MARGIN };
}

function drawStacked(input: GridInput, rows: Cell[][], widthPx: number) {
  const width = Math.max(widthPx, 240);
  const inner = width - 2 * MARGIN;
  const cellWidth = TENSION_WIDTH + 22 + 96;
  const body: string[] = [];
  let y = MARGIN;
  input.measurands.forEach(({ title, measured }, row) => {
    const name = lines(title, inner, 2);
    const value = lines(measured, inner, 2);
    body.push(...block(name, MARGIN, y, true));
    y += name.length * lineHeight;
    body.push(...block(value, MARGIN, y, false, "quiet"));
    y += value.length * lineHeight + 2;
    rows[row]?.forEach((cell, column) => {
      const who = lines(input.hypotheses[column]?.title ?? "", inner - cellWidth, 2);
      body.push(...drawCell(cell, MARGIN, y));
      body.push(...block(who, MARGIN + cellWidth, y, false));
      y += Math.max(1, who.length) * lineHeight + 2;
    });
    y += lineHeight / 2;
  });
  return { body, height: y + MARGIN };
}

function drawCell({ verdict }: Cell, x: number, top: number): string[] {
  const at = (text: string, start: number, style = "") =>
    textElement(placeText(text, { x: start, top, style: LABEL_STYLE }), style);
  if (verdict === null) return [at("silent", x + TENSION_WIDTH + 22, "quiet")];
  const mark = VERDICT_MARKS[verdict.verdict];
  const after = verdict.order === "after" ? "*" : "";
  return [
    ...(verdict.tension === null
      ? []
      : [at(formatTension(verdict.tension), x + TENSION_WIDTH - 6, "end")]),
    element("path", {
      d: mark.path,
      transform: `translate(${(x + TENSION_WIDTH).toFixed(1)} ${(top + 2).toFixed(1)})`,
      class: "line",
      "stroke-width": 1.4,
      "stroke-dasharray": mark.dash,
    }),
    at(VERDICT_WORDS[verdict.verdict] + after, x + TENSION_WIDTH + 22),
  ];
}

function gridInWords({ measurands, hypotheses }: GridInput, rows: Cell[][]): string {
  const sentences = measurands.map(({ title }, row) => {
    const cells = hypotheses.map((hypothesis, column) => {
      const verdict = rows[row]?.[column]?.verdict ?? null;
      if (verdict === null) return `${hypothesis.title} silent`;
      const filed = verdict.order === "after" ? " (filed after data)" : "";
      return `${hypothesis.title} ${VERDICT_WORDS[verdict.verdict]}${filed}`;
    });
    return `${title}: ${cells.join(", ")}.`;
  });
  return sentences.join(" ") || "No measurands.";
}

function lines(text: string, width: number, maxLines: number): string[] {
  return wrapText(text, width, { measure: estimateTextWidth, fontSize, bold: true, maxLines });
}

function block(texts: string[], x: number, top: number, bold: boolean, style = ""): string[] {
  return texts.map((text, row) =>
    textElement(
      placeText(text, { x, top: top + row * lineHeight, bold, style: LABEL_STYLE }),
      style,
    ),
  );
}
