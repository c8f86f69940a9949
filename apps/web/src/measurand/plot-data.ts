import type { Measurand, Measurement, Observable } from "@weighhouse/campaign/document";
import type { MeasurandStanding } from "@weighhouse/campaign/standings";

export interface PlotPoint {
  id: string;
  /** Along the plot's axis; a time in milliseconds. */
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

/** What the points stand along: a curve's condition, else time, else the order of posting from 1. */
export type Along =
  | { by: "condition"; key: string; title: string; unit: string | null }
  | { by: "time" }
  | { by: "order" };

export interface MeasurandPlotData {
  along: Along;
  points: PlotPoint[];
  bands: PlotBand[];
  combined: { value: number; low: number; high: number } | null;
  reference: { low: number; high: number } | null;
  log: boolean;
  unit: string | null;
  x: [number, number];
  y: [number, number];
}

/** Everything that the plot of a quantity shows, in its natural unit, with its axes. */
export function measurandPlot(input: {
  measurand: Measurand;
  observable: Observable;
  measurements: readonly Measurement[];
  bands: PlotBand[];
  combined: MeasurandStanding["combined"];
}): MeasurandPlotData {
  const { observable, measurand, bands } = input;
  const log = observable.scale === "log10";
  const along = alongOf(input);
  const points = input.measurements.flatMap((each, order) => {
    const point = pointOf(each, log);
    return point === null ? [] : [{ ...point, x: placeOf(each, order, along) }];
  });
  const combined = input.combined && spread(input.combined.value, input.combined.sd, log);
  const reference = referenceRange(measurand.reference, log);
  const y = yRange({ points, bands, combined, reference, log });
  return {
    along,
    points,
    bands,
    combined: combined && { value: input.combined?.value ?? 0, ...combined },
    reference,
    log,
    unit: observable.unit,
    x: xRange(points, along),
    y,
  };
}

type Drawn = Parameters<typeof measurandPlot>[0];

/** A curve's reference says what it runs along; else its range or its kind does. */
function alongOf({ measurand, observable, measurements }: Drawn): Along {
  const { reference, where } = measurand;
  const named = reference?.family === "polynomial" ? reference.in : (Object.keys(where)[0] ?? null);
  const wanted = named ?? observable.conditions[0]?.key;
  const condition = observable.conditions.find(({ key }) => key === wanted);
  if (
    measurand.shape === "curve" &&
    condition !== undefined &&
    measurements.every(({ conditions }) => typeof conditions[condition.key] === "number")
  ) {
    const { key, title, unit } = condition;
    return { by: "condition", key, title: title ?? key, unit };
  }
  return { by: measurements.every(({ observedAt }) => observedAt !== null) ? "time" : "order" };
}

function placeOf({ conditions, observedAt }: Measurement, order: number, along: Along): number {
  if (along.by === "condition") return conditions[along.key]!;
  return along.by === "time" && observedAt !== null ? Date.parse(observedAt) : order + 1;
}

function pointOf(measurement: Measurement, log: boolean): Omit<PlotPoint, "x"> | null {
  if (measurement.count !== null) return countedPoint(measurement, measurement.count);
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

/** A count as the rate that it gives, with the root of the count for its error (common practice). */
function countedPoint(measurement: Measurement, count: number): Omit<PlotPoint, "x"> {
  const { id, exposure, background, setAside, facility } = measurement;
  const per = exposure ?? 1;
  const value = (count - (background ?? 0)) / per;
  const sd = Math.sqrt(Math.max(count, 1)) / per;
  return {
    id,
    value,
    low: value - sd,
    high: value + sd,
    error: [sd, sd],
    limit: null,
    counted: setAside === null,
    facility,
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

function xRange(points: readonly PlotPoint[], along: Along): [number, number] {
  const xs = points.map((point) => point.x);
  if (xs.length === 0) return [0, 1];
  const [from, to] = [Math.min(...xs), Math.max(...xs)];
  const least = along.by === "time" ? 3_600_000 : 0.5;
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
