import type { Measurand, Measurement, Observable } from "@weighhouse/campaign/document";
import type { MeasurandStanding } from "@weighhouse/campaign/standings";

export interface PlotPoint {
  id: string;
  /** Milliseconds where every measurement has its time, else the order of posting from 1. */
  x: number;
  value: number;
  low: number;
  high: number;
  /** Recharts' error bar: how far down and up from the value. */
  error: [number, number];
  limit: Measurement["limit"];
  counted: boolean;
  facility: string | null;
}

export interface PlotBand {
  key: string;
  title: string;
  index: number;
  lower: number | null;
  upper: number | null;
}

export interface MeasurandPlotData {
  points: PlotPoint[];
  bands: PlotBand[];
  combined: { value: number; low: number; high: number } | null;
  reference: { low: number; high: number } | null;
  timed: boolean;
  log: boolean;
  unit: string | null;
  x: [number, number];
  y: [number, number];
}

/** Everything that the plot of a constant quantity shows, in its natural unit, with its axes. */
export function measurandPlot(input: {
  measurand: Measurand;
  observable: Observable;
  measurements: readonly Measurement[];
  bands: PlotBand[];
  combined: MeasurandStanding["combined"];
}): MeasurandPlotData {
  const { observable, measurand, bands } = input;
  const log = observable.scale === "log10";
  const timed = input.measurements.every((each) => each.observedAt !== null);
  const points = input.measurements.flatMap((each, order) => {
    const point = pointOf(each, log);
    const x = each.observedAt !== null && timed ? Date.parse(each.observedAt) : order + 1;
    return point === null ? [] : [{ ...point, x }];
  });
  const combined = input.combined && spread(input.combined.value, input.combined.sd, log);
  const reference = referenceRange(measurand.reference, log);
  const y = yRange({ points, bands, combined, reference, log });
  return {
    points,
    bands,
    combined: combined && { value: input.combined?.value ?? 0, ...combined },
    reference,
    timed,
    log,
    unit: observable.unit,
    x: xRange(points, timed),
    y,
  };
}

function pointOf(measurement: Measurement, log: boolean): Omit<PlotPoint, "x"> | null {
  const { value } = measurement;
  if (value === null || (log && value <= 0)) return null;
  const { low, high } = errorRange(measurement, value, log);
  return {
    id: measurement.id,
    value,
    low,
    high,
    error: [value - low, high - value],
    limit: measurement.limit,
    counted: measurement.setAside === null,
    facility: measurement.facility,
  };
}

function errorRange(measurement: Measurement, value: number, log: boolean) {
  if (measurement.sdDex !== null) return spread(value, measurement.sdDex, true);
  const minus = measurement.minus ?? measurement.sd ?? 0;
  const plus = measurement.plus ?? measurement.sd ?? 0;
  const low = value - minus;
  // A bar that would reach zero or below has no end on a logarithmic axis: it stops a decade down.
  return { low: log && low <= 0 ? value / 10 : low, high: value + plus };
}

/** One standard deviation either way; on log10 the deviation is in dex. */
function spread(value: number, sd: number, log: boolean) {
  return log
    ? { low: value / 10 ** sd, high: value * 10 ** sd }
    : { low: value - sd, high: value + sd };
}

function referenceRange(reference: Measurand["reference"], log: boolean) {
  if (reference === null) return null;
  if (reference.family === "uniform") return { low: reference.lower, high: reference.upper };
  if (reference.family === "normal") return spread(reference.mean, 2 * reference.sd, log);
  if (reference.family === "gamma") {
    return {
      low: Math.max(0, reference.mean - 2 * reference.sd),
      high: reference.mean + 2 * reference.sd,
    };
  }
  return spread(reference.centre, 2 * reference.sd, log);
}

function xRange(points: readonly PlotPoint[], timed: boolean): [number, number] {
  const xs = points.map((point) => point.x);
  if (xs.length === 0) return [0, 1];
  const [from, to] = [Math.min(...xs), Math.max(...xs)];
  const least = timed ? 3_600_000 : 0.5;
  const pad = Math.max((to - from) * 0.06, least);
  return [from - pad, to + pad];
}

/** What was measured and what is predicted decides the range; the reference fills it if nothing else. */
function yRange(parts: {
  points: readonly PlotPoint[];
  bands: readonly PlotBand[];
  combined: { low: number; high: number } | null;
  reference: { low: number; high: number } | null;
  log: boolean;
}): [number, number] {
  const { points, bands, combined, reference, log } = parts;
  const ends = [
    ...points.flatMap((point) => [point.low, point.high]),
    ...bands.flatMap((band) => [band.lower, band.upper]),
    ...(combined ? [combined.low, combined.high] : []),
  ].filter((end): end is number => end !== null && Number.isFinite(end) && (!log || end > 0));
  const shown = ends.length > 0 ? ends : reference ? [reference.low, reference.high] : [0, 1];
  const [from, to] = [Math.min(...shown), Math.max(...shown)];
  if (log) {
    const factor = 10 ** Math.max(0.08 * Math.log10(to / from), 0.04);
    return [from / factor, to * factor];
  }
  const pad = (to - from) * 0.08 || Math.abs(to) * 0.1 || 1;
  return [from - pad, to + pad];
}
