import type { Axis } from "./axis";
import { hypothesisMark, markElement } from "./hypothesis-marks";
import { element, short } from "./svg";

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

/** The axis of values and the plot's edges. */
export type Plot = { x: Axis; left: number; right: number };

export function predictionBand(
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

export function errorBar(
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
  const low = measurement.low === null ? plot.left : within(plot.x.at(measurement.low), plot);
  const high = measurement.high === null ? plot.right : within(plot.x.at(measurement.high), plot);
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

export function combinedMark(
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

export function endsOf(
  { value, sd }: { value: number; sd: number },
  scale: string,
): [number, number] {
  return scale === "log10" ? [value / 10 ** sd, value * 10 ** sd] : [value - sd, value + sd];
}

export function within(x: number, { left, right }: Plot): number {
  return Number.isFinite(x)
    ? Math.max(left, Math.min(x, right))
    : x < 0 || Number.isNaN(x)
      ? left
      : right;
}
