import type { BeamInput, BeamLayout, BeamOptions, BeamPlan } from "./beam";
import { layoutHorizontal } from "./beam-horizontal";
import { LABEL_STYLE } from "./beam-labels";
import { layoutUpright } from "./beam-upright";
import type { Box, PlacedText } from "./boxes";
import { formatLnEvidence, formatLog10B } from "./standing-numbers";

export type { BeamInput, BeamLayout, BeamMark, BeamOptions } from "./beam";

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
  const hypotheses = input.hypotheses.map((item, index) => {
    const leads = index === 0 && item.log10BayesFactor === 0;
    const number = leads ? "leads" : formatLog10B(item.log10BayesFactor);
    return { ...item, role: "hypothesis" as const, number, index, leads };
  });
  if (input.noModel === null) return hypotheses;
  const { log10BayesFactor, lnEvidence } = input.noModel;
  const noModel = {
    key: "no-model",
    title: "no model",
    log10BayesFactor,
    error: 0,
    number: `ln evidence ${formatLnEvidence(lnEvidence)}`,
    note: null,
    role: "no-model" as const,
    index: -1,
    leads: false,
  };
  const place = hypotheses.findIndex(
    (item) => (item.log10BayesFactor ?? -Infinity) < log10BayesFactor,
  );
  const before = place === -1 ? hypotheses.length : place;
  return [...hypotheses.slice(0, before), noModel, ...hypotheses.slice(before)];
}
