import { axis, rangeOf, type Axis } from "./axis";
import { LABEL_STYLE, placeText } from "./beam-labels";
import {
  combinedMark,
  endsOf,
  errorBar,
  predictionBand,
  within,
  type MeasurandInput,
  type Plot,
} from "./measurand-marks";
import { formatInterval, formatMeasured } from "./numbers";
import { element, figure, textElement } from "./svg";
import { estimateTextWidth, wrapText } from "./text-width";

export type { MeasurandInput } from "./measurand-marks";

const MARGIN = 8;
const { fontSize, lineHeight } = LABEL_STYLE;
const ROW = 22;
/** Past this many, measurements are drawn closer together and without names. */
const MOST_NAMED = 30;

type Row = { name: string; height: number; draw: (y: number, plot: Plot) => string[] };
/**
 * A measurand's predictions as bands over its measurements with error bars, all against one axis of
 * values; the reference lies behind, limits are arrows.
 */
export function measurandSvg(input: MeasurandInput, options: { widthPx: number }): string {
  const width = Math.max(280, Math.floor(options.widthPx));
  const names = Math.min(220, width * 0.36);
  const rows = rowsOf(input, names);
  const [left, right] = [MARGIN + names + 10, width - MARGIN - 8];
  const log = input.observable.scale === "log10";
  const range = rangeOf(extent(input), log);
  const x = axis(range, [left, right], Math.max(3, Math.floor((right - left) / 70)));
  const plot = { x, left, right };
  const height = rows.reduce((sum, row) => sum + row.height, 0);
  const bottom = MARGIN + height;
  let y = MARGIN;
  const drawn = rows.flatMap((row) => {
    const parts = [...nameOf(row, y, names), ...row.draw(y + row.height / 2, plot)];
    y += row.height;
    return parts;
  });
  return figure(
    {
      id: `measurand-${input.key}`,
      title: `${input.title}: predictions and measurements`,
      description: measurandInWords(input),
      width,
      height: bottom + 2 * lineHeight + 14,
    },
    [
      ...reference(input, plot, bottom),
      ...x.graduations.flatMap((graduation) => graduationLine(graduation, plot, bottom)),
      ...combinedBand(input, plot, bottom),
      ...drawn,
      ...unitLine(input, plot, bottom),
    ],
  );
}

function rowsOf(
  { predictions, measurements, combined, observable }: MeasurandInput,
  names: number,
): Row[] {
  const named = measurements.length <= MOST_NAMED;
  const height = named ? ROW : (MOST_NAMED * ROW) / measurements.length;
  return [
    ...predictions.map((prediction) => ({
      name: prediction.title,
      height: nameLines(prediction.title, names, 2).length > 1 ? 2 * lineHeight + 4 : ROW,
      draw: (y: number, plot: Plot) => predictionBand(prediction, y, plot),
    })),
    ...measurements.map((measurement, index) => ({
      name: named ? measurement.id : index === 0 ? `${measurements.length} measurements` : "",
      height: named || index > 0 ? height : Math.max(height, ROW),
      draw: (y: number, plot: Plot) => errorBar(measurement, y, plot, Math.min(height, ROW)),
    })),
    ...(combined === null
      ? []
      : [
          {
            name: "combined",
            height: ROW + 4,
            draw: (y: number, plot: Plot) => combinedMark(combined, observable.scale, y, plot),
          },
        ]),
  ];
}

/** What must be in view: everything measured and predicted; the reference only where nothing is. */
function extent({ predictions, measurements, combined, observable, reference }: MeasurandInput) {
  const ends = [
    ...predictions.flatMap(({ low, high }) => [low, high]),
    ...measurements.flatMap(({ value, low, high }) => [value, low, high]),
    ...(combined === null ? [] : endsOf(combined, observable.scale)),
  ].filter((end) => end !== null);
  if (ends.length > 0) return ends;
  return reference === null ? [] : [reference.low, reference.high];
}

function nameOf(row: Row, y: number, width: number): string[] {
  const lines = nameLines(row.name, width, row.height > ROW + 4 ? 2 : 1);
  const top = y + (row.height - lines.length * lineHeight) / 2;
  return lines.map((text, index) =>
    textElement(placeText(text, { x: MARGIN, top: top + index * lineHeight, style: LABEL_STYLE })),
  );
}

/** A title has two lines before it is cut, a measurement's id one. */
function nameLines(name: string, width: number, maxLines: number): string[] {
  const style = { measure: estimateTextWidth, fontSize, bold: false, maxLines };
  return wrapText(name, width, style);
}

function combinedBand(
  { combined, observable }: MeasurandInput,
  plot: Plot,
  bottom: number,
): string[] {
  if (combined === null) return [];
  const ends = endsOf(combined, observable.scale).map((end) => within(plot.x.at(end), plot));
  return ends.map((x) =>
    element("line", {
      x1: x,
      y1: MARGIN,
      x2: x,
      y2: bottom,
      class: "edge",
      "stroke-dasharray": "2 3",
    }),
  );
}

function reference({ reference }: MeasurandInput, plot: Plot, bottom: number): string[] {
  if (reference === null) return [];
  const [from, to] = [
    within(plot.x.at(reference.low), plot),
    within(plot.x.at(reference.high), plot),
  ];
  return [
    element("rect", {
      x: from,
      y: MARGIN,
      width: Math.max(0, to - from),
      height: bottom - MARGIN,
      class: "well",
      opacity: 0.3,
    }),
  ];
}

function graduationLine(
  { value, text }: Axis["graduations"][number],
  plot: Plot,
  bottom: number,
): string[] {
  const x = plot.x.at(value);
  const half = estimateTextWidth(text, fontSize, false) / 2;
  const inFrame = Math.min(x, plot.right + 8 - half);
  const label = placeText(text, { x: inFrame, top: bottom + 4, style: LABEL_STYLE });
  return [
    element("line", { x1: x, y1: MARGIN, x2: x, y2: bottom + 4, class: "rule" }),
    textElement(label, "quiet middle"),
  ];
}

/** The axis' unit, and the combined value as a number: neither is ever cut. */
function unitLine({ observable, combined }: MeasurandInput, plot: Plot, bottom: number): string[] {
  const top = bottom + lineHeight + 6;
  const unit = observable.unit === null || observable.unit === "1" ? "" : observable.unit;
  const value = combined === null ? "" : formatMeasured(combined.value, combined.sd, observable);
  return [
    ...(value === ""
      ? []
      : [textElement(placeText(`combined ${value}`, { x: MARGIN, top, style: LABEL_STYLE }))]),
    ...(unit === ""
      ? []
      : [textElement(placeText(unit, { x: plot.right, top, style: LABEL_STYLE }), "quiet end")]),
  ];
}

function measurandInWords(input: MeasurandInput): string {
  const { predictions, measurements, combined, reference, observable } = input;
  const unit = observable.unit === null || observable.unit === "1" ? "" : ` ${observable.unit}`;
  const range = ({ low, high }: { low: number | null; high: number | null }) =>
    `${formatInterval(low, high)}${unit}`;
  return [
    ...predictions.map((prediction) => `${prediction.title} expects ${range(prediction)}.`),
    `${measurements.length} measurements.`,
    combined === null
      ? "No combined value."
      : `Combined: ${formatMeasured(combined.value, combined.sd, observable)}.`,
    ...(reference === null ? [] : [`No-model range: ${range(reference)}.`]),
  ].join(" ");
}
