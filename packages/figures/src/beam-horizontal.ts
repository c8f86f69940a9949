import {
  composeFlatLabel,
  composeLabel,
  placeLabel,
  placeText,
  type Label,
  type LabelStyle,
} from "./beam-labels";
import type { BeamBand, BeamLayout, BeamMark, BeamPlan, BeamTick } from "./beam";
import {
  BEAM_PX,
  categoryStretches,
  legendLines,
  SPOT_PX,
  spotStretch,
  statementBlock,
} from "./beam-parts";
import { beamScale, tickCandidates, type BeamScale } from "./beam-scale";
import { clampInto, overlap, type Box } from "./boxes";

const MARGIN_PX = 10;
const DROP_PX = 26;
const GAP_PX = 8;
const MOST_TALL_LABELS = 6;

/**
 * The beam across the frame, the leader at its right end. Labels stand to the right of their stems
 * like flags, and the ones further left hang lower where they would meet: a stem is then always left
 * of the labels that are higher, and crosses none.
 */
export function layoutHorizontal(plan: BeamPlan): BeamLayout {
  const { style, width } = plan;
  const labels = composeLabels(plan);
  const { scale, right, length } = fitScale(plan, labels);

  const ticksTop = 4;
  const boardTop = ticksTop + style.lineHeight + 12;
  const statement = plan.noneDescribes
    ? statementBlock({ x: MARGIN_PX, top: boardTop, width: width - 2 * MARGIN_PX }, style)
    : null;
  const beamY =
    statement === null ? boardTop + 4 : boardTop + statement.box.height + SPOT_PX / 2 + 2;

  const marks = hangMarks(plan, labels, { scale, right, length, beamY });
  const hungTo = Math.max(beamY + 70, ...marks.map((mark) => mark.label.y + mark.label.height));
  const bands = placeBands(scale, style, { right, top: boardTop - 6, bottom: hungTo + GAP_PX });
  const inBands = bands.every((band) => band.label !== null);
  const legendTop = hungTo + GAP_PX + (inBands ? style.lineHeight + 6 : 4);
  const frame = { x: MARGIN_PX, top: legendTop, width: width - 2 * MARGIN_PX };
  const legend = legendLines(inBands, frame, style);

  return {
    width,
    height: legendTop + legend.length * style.lineHeight + 4,
    direction: "horizontal",
    beam: { from: { x: right - scale.leader, y: beamY }, to: { x: right - length, y: beamY } },
    beyond:
      scale.leader > 0
        ? { from: { x: right - scale.leader, y: beamY }, to: { x: right, y: beamY } }
        : null,
    bands: inBands ? bands : bands.map((band) => ({ ...band, label: null })),
    ticks: placeTicks(scale, style, { right, top: ticksTop, beamY, width }),
    marks,
    statement,
    legend,
  };
}

/** Many labels are flat, so that they don't hang too deep. */
function composeLabels({ items, width, style }: BeamPlan): Label[] {
  if (items.length > MOST_TALL_LABELS) {
    const flatWidth = Math.min(340, Math.max(130, width * 0.3));
    return items.map((item) => composeFlatLabel(item, flatWidth, style));
  }
  const tallWidth = Math.min(230, Math.max(130, width * 0.2));
  return items.map((item) => composeLabel(item, tallWidth, style));
}

/** Leaves as much room right of the beam's end as the labels there need. */
function fitScale(plan: BeamPlan, labels: Label[]) {
  const values = plan.items.map((item) => item.log10BayesFactor);
  const attempt = (room: number) => {
    const right = plan.width - MARGIN_PX - room;
    const length = right - MARGIN_PX - 4;
    return { right, length, scale: beamScale(values, length) };
  };
  const first = attempt(labels[0]?.width ?? 40);
  const overflows = plan.items.some(
    (item, index) =>
      first.right - first.scale.at(item.log10BayesFactor) + (labels[index]?.width ?? 0) >
      plan.width - MARGIN_PX,
  );
  return overflows ? attempt(Math.max(...labels.map((label) => label.width))) : first;
}

function hangMarks(
  plan: BeamPlan,
  labels: Label[],
  at: { scale: BeamScale; right: number; length: number; beamY: number },
): BeamMark[] {
  const hung: BeamMark[] = [];
  plan.items.forEach((item, index) => {
    const label = labels[index];
    if (label === undefined) return;
    const stretch = spotStretch(item, at.scale, at.length);
    const x = at.right - stretch.at;
    const above = hung.filter((mark) => mark.label.x < x + label.width + GAP_PX);
    const y = Math.max(
      at.beamY + DROP_PX,
      ...above.map((mark) => mark.label.y + mark.label.height + GAP_PX),
    );
    const { box, lines } = placeLabel(label, { x, y }, plan.style);
    hung.push({
      key: item.key,
      title: item.title,
      role: item.role,
      index: item.index,
      leads: item.leads,
      spot: {
        x: at.right - stretch.to,
        y: at.beamY - SPOT_PX / 2,
        width: stretch.to - stretch.from,
        height: SPOT_PX,
      },
      stem: [
        { x, y: at.beamY + BEAM_PX / 2 },
        { x, y: y + label.height },
      ],
      label: box,
      lines,
    });
  });
  return hung;
}

function placeBands(
  scale: BeamScale,
  style: LabelStyle,
  at: { right: number; top: number; bottom: number },
): BeamBand[] {
  return categoryStretches(scale).map(({ from, words, near, far }) => {
    const box = { x: at.right - far, y: at.top, width: far - near, height: at.bottom - at.top };
    const text = placeText(words, { x: box.x + 4, top: at.bottom + 2, style });
    const spare = box.width - text.box.width;
    const centred = placeText(words, { x: box.x + spare / 2, top: at.bottom + 2, style });
    return { from, words, box, label: spare > 8 ? centred : null };
  });
}

function placeTicks(
  scale: BeamScale,
  style: LabelStyle,
  at: { right: number; top: number; beamY: number; width: number },
): BeamTick[] {
  const taken: Box[] = [];
  const ticks: BeamTick[] = [];
  for (const { value, text, category } of tickCandidates(scale.reach)) {
    const x = at.right - scale.at(value);
    const textWidth = style.measure(text, style.fontSize, false);
    const start = clampInto(x - textWidth / 2, textWidth, [2, at.width - 2]);
    const label = placeText(text, { x: start, top: at.top, style });
    const room = { ...label.box, x: label.box.x - GAP_PX, width: label.box.width + 2 * GAP_PX };
    const free = !taken.some((box) => overlap(box, room));
    if (free) taken.push(label.box);
    if (!free && !category) continue;
    const reach = BEAM_PX / 2 + 4;
    ticks.push({
      value,
      from: { x, y: at.beamY - reach },
      to: { x, y: at.beamY + reach },
      label: free ? label : null,
    });
  }
  return ticks;
}
