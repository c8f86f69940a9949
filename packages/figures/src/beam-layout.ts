import { layoutHorizontal } from "./beam-horizontal";
import { LABEL_STYLE, type BeamItem, type LabelStyle } from "./beam-labels";
import type { Box, PlacedText, Point } from "./boxes";
import { layoutUpright } from "./beam-upright";

/** What hangs on the beam, the leader first. */
export type BeamInput = {
  hypotheses: Omit<BeamItem, "role">[];
  /** log10 of the no-model evidence against the leader's; null where there is none. */
  noModel: number | null;
  /** Set when every hypothesis with data has p < 0.001. */
  noneDescribes: boolean;
};

export type BeamOptions = {
  widthPx: number;
  /** By default upright below {@link UPRIGHT_BELOW_PX}. */
  direction?: "horizontal" | "upright";
  style?: LabelStyle;
};

/** A hung thing: a spot on the beam, a stem down (or aside) from it, and a label at its end. */
export type BeamMark = {
  key: string;
  title: string;
  role: BeamItem["role"];
  /** Place in the order of rank, for hue and pattern; -1 for no-model. */
  index: number;
  leads: boolean;
  /** As wide along the beam as the uncertainty to either side, and never invisible. */
  spot: Box;
  stem: Point[];
  label: Box;
  lines: PlacedText[];
};

export type BeamBand = { from: number; words: string; box: Box; label: PlacedText | null };
export type BeamTick = { value: number; from: Point; to: Point; label: PlacedText | null };

export type BeamLayout = {
  width: number;
  height: number;
  direction: "horizontal" | "upright";
  beam: { from: Point; to: Point };
  /** Dashed, from the leader on to a no-model evidence higher than its own. */
  beyond: { from: Point; to: Point } | null;
  bands: BeamBand[];
  ticks: BeamTick[];
  marks: BeamMark[];
  /** "No hypothesis describes the data", written on the beam. */
  statement: { box: Box; lines: PlacedText[] } | null;
  legend: PlacedText[];
};

export const UPRIGHT_BELOW_PX = 640;
/** Narrower frames are laid out at this width: no label would have room. */
export const LEAST_WIDTH_PX = 240;

/**
 * Lays out the beam for a frame of the given width; its height follows from what hangs on it.
 *
 * No two labels overlap, none leaves the frame and no stem runs through another's label, however
 * close together the hypotheses lie: crowded labels hang on longer stems.
 */
export function layoutBeam(input: BeamInput, options: BeamOptions): BeamLayout {
  const width = Math.max(LEAST_WIDTH_PX, Math.floor(options.widthPx));
  const style = options.style ?? LABEL_STYLE;
  const direction = options.direction ?? (width < UPRIGHT_BELOW_PX ? "upright" : "horizontal");
  const plan: BeamPlan = {
    items: hungItems(input),
    noneDescribes: input.noneDescribes,
    width,
    style,
  };
  return direction === "upright" ? layoutUpright(plan) : layoutHorizontal(plan);
}

/** What both directions lay out: items from the leading end to the far one. */
export type BeamPlan = {
  items: (BeamItem & { index: number; leads: boolean })[];
  noneDescribes: boolean;
  width: number;
  style: LabelStyle;
};

/** Every text and label box of a layout: what must not overlap. */
export function textBoxes(layout: BeamLayout): Box[] {
  const placed = (text: PlacedText | null) => (text === null ? [] : [text.box]);
  return [
    ...layout.marks.map((mark) => mark.label),
    ...layout.ticks.flatMap((tick) => placed(tick.label)),
    ...layout.bands.flatMap((band) => placed(band.label)),
    ...(layout.statement === null ? [] : [layout.statement.box]),
    ...layout.legend.map((line) => line.box),
  ];
}

function hungItems(input: BeamInput): BeamPlan["items"] {
  const hypotheses = input.hypotheses.map((item, index) => ({
    ...item,
    role: "hypothesis" as const,
    index,
    leads: index === 0 && item.log10BayesFactor === 0,
  }));
  if (input.noModel === null) return hypotheses;
  const noModel = {
    key: "no-model",
    title: "no model",
    log10BayesFactor: input.noModel,
    error: 0,
    note: null,
    role: "no-model" as const,
    index: -1,
    leads: false,
  };
  const place = hypotheses.findIndex(
    (item) => (item.log10BayesFactor ?? -Infinity) < (noModel.log10BayesFactor ?? -Infinity),
  );
  const before = place === -1 ? hypotheses.length : place;
  return [...hypotheses.slice(0, before), noModel, ...hypotheses.slice(before)];
}
