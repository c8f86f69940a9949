import type {
  CampaignDocument,
  Measurand,
  Measurement,
  Observable,
  Reference,
} from "@weighhouse/campaign/document";
import type { Standings } from "@weighhouse/campaign/standings";
import { beamInput } from "@weighhouse/figures/beam-input";
import { beamSvg } from "@weighhouse/figures/beam-svg";
import { gridSvg } from "@weighhouse/figures/grid-svg";
import type { MeasurandInput } from "@weighhouse/figures/measurand-marks";
import { measurandSvg } from "@weighhouse/figures/measurand-svg";
import { ABSENT, formatMeasured } from "@weighhouse/figures/numbers";
import { timelineSvg } from "@weighhouse/figures/timeline-svg";
import { figurePath, measurandFigurePath } from "./layout";
import type { TimelineRow } from "./timeline";

/** A page's width between margins, at 96 pixels an inch: figures keep their size in print. */
const WIDTH_PX = 680;
/** Quantities drawn, at most: an archive is for reading too. */
export const MOST_MEASURAND_FIGURES = 2000;

export type Drawing = { path: string; svg: string };

/** The standings, the verdicts, the evidence over time and each measurand, as SVG. */
export function figuresOf(
  document: CampaignDocument,
  standings: Standings,
  timeline: readonly TimelineRow[],
): Drawing[] {
  const places = new Map(document.hypotheses.map(({ key }, place) => [key, place]));
  const placeOf = (key: string) => places.get(key) ?? document.hypotheses.length;
  const titles = new Map(document.hypotheses.map(({ key, title }) => [key, title]));
  const titleOf = (key: string) => titles.get(key) ?? "None of these";
  const of = { document, standings, placeOf, titleOf };
  const beam = beamSvg(beamInput(standings, titleOf), {
    widthPx: WIDTH_PX,
    direction: "upright",
    placeOf,
  });
  const grid = gridSvg(gridInput(of), { widthPx: WIDTH_PX });
  return [
    { path: figurePath("beam"), svg: beam },
    { path: figurePath("grid"), svg: grid },
    {
      path: figurePath("timeline"),
      svg: timelineSvg(timelineInput(of, timeline), { widthPx: WIDTH_PX }),
    },
    ...drawnMeasurands(document).map((measurand) => ({
      path: measurandFigurePath(measurand.key),
      svg: measurandSvg(measurandInput(of, measurand), { widthPx: WIDTH_PX }),
    })),
  ];
}

type Of = {
  document: CampaignDocument;
  standings: Standings;
  placeOf: (key: string) => number;
  titleOf: (key: string) => string;
};

/** Events have no axis of values to draw on: they are in the grid. */
function drawnMeasurands(document: CampaignDocument): Measurand[] {
  return document.measurands
    .filter((one) => observableOf(document, one)?.scale !== "event")
    .slice(0, MOST_MEASURAND_FIGURES);
}

function observableOf(
  { observables }: CampaignDocument,
  { observable }: { observable: string },
): Observable | undefined {
  return observables.find(({ key }) => key === observable);
}

function gridInput({ document, standings, titleOf }: Of) {
  const combined = new Map(standings.measurands.map((one) => [one.key, one.combined]));
  const begin = (one: object) => (one as Partial<Measurand>).window?.from ?? "";
  const parts = [...document.measurands, ...document.derived].sort((a, b) =>
    begin(a) === begin(b) ? 0 : begin(a) < begin(b) ? -1 : 1,
  );
  return {
    measurands: parts.map((one) => {
      const value = combined.get(one.key) ?? null;
      const observable = observableOf(document, one) ?? { scale: "linear", unit: null };
      const measured = value === null ? ABSENT : formatMeasured(value.value, value.sd, observable);
      return { key: one.key, title: one.title ?? one.key, measured };
    }),
    hypotheses: standings.hypotheses
      .filter(({ key }) => key !== "noneOfThese")
      .map(({ key }) => ({ key, title: titleOf(key) })),
    verdicts: standings.verdicts,
  };
}

function timelineInput({ standings, placeOf, titleOf }: Of, rows: readonly TimelineRow[]) {
  const points = new Map<number, { at: string; lnEvidence: Record<string, number | null> }>();
  for (const { size, at, hypothesis, lnEvidence } of rows) {
    const point = points.get(size) ?? { at, lnEvidence: {} };
    point.lnEvidence[hypothesis] = lnEvidence;
    points.set(size, point);
  }
  return {
    hypotheses: standings.hypotheses.map(({ key }) => ({
      key,
      title: titleOf(key),
      place: placeOf(key),
    })),
    points: [...points.values()],
  };
}

function measurandInput(of: Of, measurand: Measurand): MeasurandInput {
  const { document, standings, placeOf, titleOf } = of;
  const observable = observableOf(document, measurand) ?? { scale: "linear", unit: null };
  const rank = new Map(standings.hypotheses.map(({ key }, index) => [key, index]));
  const verdicts = standings.verdicts
    .filter((row) => row.measurand === measurand.key && (row.lower !== null || row.upper !== null))
    .sort((a, b) => (rank.get(a.hypothesis) ?? 0) - (rank.get(b.hypothesis) ?? 0));
  const combined = standings.measurands.find(({ key }) => key === measurand.key)?.combined ?? null;
  return {
    key: measurand.key,
    title: measurand.title ?? measurand.key,
    observable,
    reference: rangeOfReference(measurand.reference, observable.scale),
    predictions: verdicts.map(({ hypothesis, lower, upper }) => ({
      key: hypothesis,
      title: titleOf(hypothesis),
      place: placeOf(hypothesis),
      low: lower,
      high: upper,
    })),
    measurements: document.measurements
      .filter((one) => one.measurand === measurand.key)
      .sort((a, b) => compareTexts(a.observedAt ?? "", b.observedAt ?? ""))
      .flatMap((one) => drawnMeasurement(one, observable)),
    combined: combined === null ? null : { value: combined.value, sd: combined.sd },
  };
}

/** What was reported in another unit than the quantity's own has no place on its axis. */
function drawnMeasurement(
  one: Measurement,
  { scale, unit }: Pick<Observable, "scale" | "unit">,
): MeasurandInput["measurements"] {
  const { id, limit, value, count } = one;
  const drawn = { id, limit, counted: one.setAside === null };
  if (count !== null) {
    const exposure = one.exposure ?? 1;
    const rate = (count - (one.background ?? 0)) / exposure;
    const sd = Math.sqrt(count) / exposure;
    return [{ ...drawn, value: rate, low: rate - sd, high: rate + sd }];
  }
  if (value === null || (one.unit !== null && one.unit !== unit)) return [];
  if (scale === "log10" && value <= 0) return [];
  const factor = 10 ** (one.sdDex ?? 0);
  const minus = one.minus ?? one.sd ?? 0;
  const plus = one.plus ?? one.sd ?? 0;
  const low = one.sdDex === null ? value - minus : value / factor;
  const high = one.sdDex === null ? value + plus : value * factor;
  // A bar that reaches zero has no end on a logarithmic axis.
  return [{ ...drawn, value, low: scale === "log10" && low <= 0 ? null : low, high }];
}

function rangeOfReference(
  reference: Reference | null,
  scale: string,
): { low: number; high: number } | null {
  if (reference === null) return null;
  if (reference.family === "uniform") return { low: reference.lower, high: reference.upper };
  const middle = reference.family === "polynomial" ? reference.centre : reference.mean;
  const reach = 2 * reference.sd;
  if (scale === "log10") return { low: middle / 10 ** reach, high: middle * 10 ** reach };
  const low = middle - reach;
  return { low: reference.family === "gamma" ? Math.max(0, low) : low, high: middle + reach };
}

function compareTexts(a: string, b: string): number {
  return a === b ? 0 : a < b ? -1 : 1;
}
