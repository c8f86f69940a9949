import { axis, rangeOf, type Axis } from "./axis";
import { LABEL_STYLE, placeText } from "./beam-labels";
import { hypothesisMark, markElement } from "./hypothesis-marks";
import { formatInterval, formatMeasured } from "./numbers";
import { element, figure, short, textElement } from "./svg";
import { estimateTextWidth, wrapText } from "./text-width";

/** A value with the ends of its uncertainty; null is an open end. */
export type Reach = { value: number; low: number | null; high: number | null };

export type MeasurandInput = {
  key: string;
  title: string;
  observable: { scale: string; unit: string | null };
  /** The no-model range; null ends are open. */
  reference: { low: number; high: number } | null;
  /** Predictions as intervals of the true value, in the order of rank. */
  predictions: {
    key: string;
    title: string;
    place: number;
    low: number | null;
    high: number | null;
  }[];
  /** In order of time. */
  measurements: (Reach & {
    id: string;
    limit: "upper" | "lower" | "fainter" | "brighter" | null;
    counted: boolean;
  })[];
  /** Their combination: value and standard uncertainty (in dex on log10). */
  combined: { value: number; sd: number } | null;
};

const MARGIN = 8;
const { fontSize, lineHeight } = LABEL_STYLE;
const ROW = 22;
/** Past this many, measurements are drawn closer together and without names. */
const MOST_NAMED = 30;

type Row = { name: string; height: number; draw: (y: number, plot: Plot) => string[] };
type Plot = { x: Axis; left: number; right: number };

/**
 * A measurand's predictions as bands over its measurements with error bars, all against one axis of
 * values; the reference lies behind, limits are arrows.
 */
export function measurandSvg(input: MeasurandInput, options: { widthPx: number }): string {
  const width = Math.max(280, Math.floor(options.widthPx));
  const rows = rowsOf(input);
  const names = Math.min(220, width * 0.36);
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

function rowsOf({ predictions, measurements, combined, observable }: MeasurandInput): Row[] {
  const named = measurements.length <= MOST_NAMED;
  const height = named ? ROW : (MOST_NAMED * ROW) / measurements.length;
  return [
    ...predictions.map((prediction) => ({
      name: prediction.title,
      height: ROW,
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

function endsOf({ value, sd }: { value: number; sd: number }, scale: string): [number, number] {
  return scale === "log10" ? [value / 10 ** sd, value * 10 ** sd] : [value - sd, value + sd];
}

function nameOf(row: Row, y: number, width: number): string[] {
  const style = { measure: estimateTextWidth, fontSize, bold: false, maxLines: 1 };
  return wrapText(row.name, width, style).map((text) =>
    textElement(
      placeText(text, { x: MARGIN, top: y + (row.height - lineHeight) / 2, style: LABEL_STYLE }),
    ),
  );
}

function predictionBand(
  prediction: MeasurandInput["predictions"][number],
  y: number,
  plot: Plot,
): string[] {
  const mark = hypothesisMark(prediction.place);
  const from = within(prediction.low === null ? plot.left : plot.x.at(prediction.low), plot);
  const to = within(prediction.high === null ? plot.right : plot.x.at(prediction.high), plot);
  const id = `measurand-band-${prediction.key}`;
  return [
    element("rect", {
      id,
      x: from,
      y: y - 6,
      width: Math.max(to - from, 3),
      height: 12,
      class: `fill${mark.hue} ink${mark.hue}`,
      "fill-opacity": 0.25,
      "stroke-dasharray": mark.dash,
    }),
    markElement(mark, plot.left - 9, y, 10),
  ];
}

function errorBar(
  measurement: MeasurandInput["measurements"][number],
  y: number,
  plot: Plot,
  size: number,
): string[] {
  const x = within(plot.x.at(measurement.value), plot);
  const style = { class: "line", opacity: measurement.counted ? null : 0.45 };
  const reach = Math.max(1, Math.min(5, size / 3));
  if (measurement.limit !== null) {
    // Values above a fainter limit are dimmer: as numbers, both mean "at least".
    const downward = measurement.limit === "upper" || measurement.limit === "brighter";
    const end = x + (downward ? -26 : 26);
    const back = downward ? 6 : -6;
    const path =
      `M${short(x)} ${short(y - reach)}V${short(y + reach)}M${short(x)} ${short(y)}H${short(end)}` +
      `l${back} ${short(-reach)}M${short(end)} ${short(y)}l${back} ${short(reach)}`;
    return [element("path", { d: path, "stroke-width": 1.4, ...style })];
  }
  const low = within(plot.x.at(measurement.low ?? measurement.value), plot);
  const high = within(plot.x.at(measurement.high ?? measurement.value), plot);
  return [
    element("path", {
      d: `M${short(low)} ${short(y)}H${short(high)}M${short(low)} ${short(y - reach)}v${short(2 * reach)}M${short(high)} ${short(y - reach)}v${short(2 * reach)}`,
      "stroke-width": 1.4,
      ...style,
    }),
    element("circle", {
      cx: x,
      cy: y,
      r: Math.max(1.2, reach * 0.7),
      fill: measurement.counted ? "currentColor" : "none",
      stroke: "currentColor",
    }),
  ];
}

function combinedMark(
  combined: { value: number; sd: number },
  scale: string,
  y: number,
  plot: Plot,
): string[] {
  const [low, high] = endsOf(combined, scale).map((end) => within(plot.x.at(end), plot));
  const x = within(plot.x.at(combined.value), plot);
  const points = [
    [low ?? x, y],
    [x, y - 6],
    [high ?? x, y],
    [x, y + 6],
  ].map(([px = 0, py = 0]) => `${short(px)},${short(py)}`);
  return [element("polygon", { points: points.join(" "), fill: "currentColor" })];
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

function within(x: number, { left, right }: Plot): number {
  return Number.isFinite(x)
    ? Math.max(left, Math.min(x, right))
    : x < 0 || Number.isNaN(x)
      ? left
      : right;
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
