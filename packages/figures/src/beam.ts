import type { Box, PlacedText, Point } from "./boxes";
import type { BeamItem, LabelStyle } from "./beam-labels";

/** What hangs on the beam, the leader first. */
export type BeamInput = {
  hypotheses: Omit<BeamItem, "role" | "number">[];
  /** Its place on the beam, and the number that the standings hold of it; null where there is none. */
  noModel: { log10BayesFactor: number; lnEvidence: number } | null;
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

/** What both directions lay out: items from the leading end to the far one. */
export type BeamPlan = {
  items: (BeamItem & { index: number; leads: boolean })[];
  noneDescribes: boolean;
  width: number;
  style: LabelStyle;
};
