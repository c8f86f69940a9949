import { axis, rangeOf, type Axis } from "./axis";
import { LABEL_STYLE, placeText } from "./beam-labels";
import { hypothesisMark, markElement } from "./hypothesis-marks";
import { spread } from "./spread";
import { formatLnEvidence } from "./standing-numbers";
import { element, figure, short, textElement } from "./svg";
import { estimateTextWidth, wrapText } from "./text-width";
import { formatDate } from "./times";

export type TimelineInput = {
  /** `place` in the document gives ink and shape. */
  hypotheses: { key: string; title: string; place: number }[];
  /** In order of time; ln evidence by hypothesis, null for a likelihood of zero, absent before it. */
  points: { at: string; lnEvidence: Record<string, number | null> }[];
};

const MARGIN = 8;
const HEIGHT = 320;
const { fontSize, lineHeight } = LABEL_STYLE;
/** Room for the axis' name. */
const TOP = MARGIN + lineHeight + 4;

type Series = TimelineInput["hypotheses"][number] & { steps: Step[] };

/** A null value is a likelihood of zero: the line ends there. */
type Step = { at: number; value: number | null };

/** ln evidence over time: it moves in steps, at the transactions that moved it. */
export function timelineSvg(input: TimelineInput, options: { widthPx: number }): string {
  const width = Math.max(280, Math.floor(options.widthPx));
  const labelWidth = Math.min(200, width * 0.34);
  const series = input.hypotheses.map((hypothesis) => ({
    ...hypothesis,
    steps: input.points.flatMap(({ at, lnEvidence }) => {
      const value = lnEvidence[hypothesis.key];
      return value === undefined ? [] : [{ at: Date.parse(at), value }];
    }),
  }));
  const labels = series.map(({ title }) => wrap(title, labelWidth));
  const blocks = labels.map((lines) => lines.length * lineHeight + 4);
  const height = Math.max(
    HEIGHT,
    blocks.reduce((sum, size) => sum + size, 0),
  );
  const values = axis(rangeOf(valuesOf(series)), [TOP + height, TOP]);
  const gutter = Math.max(
    30,
    ...values.graduations.map(({ text }) => estimateTextWidth(text, fontSize, false) + 8),
  );
  const right = width - MARGIN - labelWidth - 28;
  const times = timeAxis(input, [MARGIN + gutter, right]);
  return figure(
    {
      id: "timeline",
      title: "ln evidence over time",
      description: timelineInWords(input),
      width,
      height: TOP + height + lineHeight + 12,
    },
    [
      textElement(placeText("ln evidence", { x: MARGIN, top: 4, style: LABEL_STYLE }), "quiet"),
      ...values.graduations.flatMap(({ value, text }) =>
        valueLine(text, values.at(value), [gutter, right]),
      ),
      ...dates(input, times, TOP + height + 6),
      ...series.map((one) => steps(one, { times, values, right })),
      ...endLabels(series, labels, { values, right, height, blocks }),
    ],
  );
}

function valuesOf(series: Series[]): number[] {
  return series.flatMap(({ steps }) => steps.flatMap(({ value }) => value ?? []));
}

function timeAxis({ points }: TimelineInput, span: [number, number]): Axis {
  const instants = points.map(({ at }) => Date.parse(at));
  const [first = 0, last = first] = [instants[0], instants.at(-1)];
  return axis({ from: first, to: last > first ? last : first + 1 }, span);
}

function valueLine(text: string, y: number, [gutter, right]: [number, number]): string[] {
  const label = placeText(text, {
    x: MARGIN + gutter - 6,
    top: y - lineHeight / 2,
    style: LABEL_STYLE,
  });
  return [
    element("line", { x1: MARGIN + gutter, y1: y, x2: right, y2: y, class: "rule" }),
    textElement(label, "quiet end"),
  ];
}

function dates({ points }: TimelineInput, times: Axis, top: number): string[] {
  const [first, last] = [points[0], points.at(-1)];
  if (first === undefined || last === undefined) return [];
  const text = (at: string, style: string) =>
    textElement(
      placeText(formatDate(at), { x: times.at(Date.parse(at)), top, style: LABEL_STYLE }),
      `quiet ${style}`.trim(),
    );
  return formatDate(first.at) === formatDate(last.at)
    ? [text(first.at, "")]
    : [text(first.at, ""), text(last.at, "end")];
}

/** A step line: level until the next transaction, then straight up or down. */
function steps(series: Series, at: { times: Axis; values: Axis; right: number }): string {
  const mark = hypothesisMark(series.place);
  const x = (instant: number) => short(at.times.at(instant));
  let drawing = false;
  const path = series.steps.map((step) => {
    const along = drawing ? `H${x(step.at)}` : "";
    if (step.value === null) {
      const cross = drawing ? "m-4 -4l8 8m0 -8l-8 8" : "";
      drawing = false;
      return along + cross;
    }
    const y = short(at.values.at(step.value));
    const move = drawing ? `V${y}` : `M${x(step.at)} ${y}`;
    drawing = true;
    return along + move;
  });
  if (drawing) path.push(`H${short(at.right)}`);
  if (path.join("") === "") return "";
  return element("path", {
    id: `timeline-${series.key}`,
    d: path.join(""),
    fill: "none",
    class: `ink${mark.hue}`,
    "stroke-width": 1.8,
    "stroke-dasharray": mark.dash,
  });
}

/** Titles stand at their lines' ends, moved apart where lines end close together. */
function endLabels(
  series: Series[],
  labels: string[][],
  at: { values: Axis; right: number; height: number; blocks: number[] },
): string[] {
  const ends = series
    .flatMap(({ steps, place }, index) => {
      const last = steps.findLast(({ value }) => value !== null)?.value ?? null;
      return last === null ? [] : [{ index, place, y: at.values.at(last) }];
    })
    .sort((a, b) => a.y - b.y || a.index - b.index);
  const tops = spread(
    ends.map(({ index, y }) => {
      const size = at.blocks[index] ?? lineHeight;
      return { wanted: y - TOP - size / 2, size };
    }),
    at.height,
  );
  return ends.flatMap(({ index, place, y }, order) => {
    const top = TOP + (tops[order] ?? 0);
    const middle = top + (at.blocks[index] ?? lineHeight) / 2;
    const x = at.right + 28;
    const elbow = `${short(at.right)},${short(y)} ${short(x - 18)},${short(middle)}`;
    return [
      element("polyline", { points: elbow, fill: "none", class: "edge" }),
      markElement(hypothesisMark(place), x - 10, middle, 10),
      ...(labels[index] ?? []).map((text, row) =>
        textElement(placeText(text, { x, top: top + 2 + row * lineHeight, style: LABEL_STYLE })),
      ),
    ];
  });
}

function timelineInWords({ hypotheses, points }: TimelineInput): string {
  const last = points.at(-1);
  if (last === undefined) return "Nothing has been scored yet.";
  const ends = hypotheses.map(
    ({ key, title }) => `${title} ${formatLnEvidence(last.lnEvidence[key] ?? null)}`,
  );
  return `${points.length} steps; last, on ${formatDate(last.at)}: ${ends.join("; ")}.`;
}

function wrap(title: string, width: number): string[] {
  return wrapText(title, width, { measure: estimateTextWidth, fontSize, bold: false, maxLines: 2 });
}
