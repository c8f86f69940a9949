import { composeLabel, placeLabel, placeText, type Label, type LabelStyle } from "./beam-labels";
import type { BeamLayout, BeamMark, BeamPlan, BeamTick } from "./beam";
import {
  BEAM_PX,
  categoryStretches,
  legendLines,
  SPOT_PX,
  spotStretch,
  statementBlock,
} from "./beam-parts";
import { beamScale, tickCandidates, type BeamScale } from "./beam-scale";
import { overlap, type Box } from "./boxes";
import { spread } from "./spread";

const MARGIN_PX = 8;
const GAP_PX = 8;
const BEAM_X_PX = 58;
const LABELS_X_PX = 96;
const LEAST_LENGTH_PX = 300;

/**
 * The beam upright for narrow frames, the leader at its top, labels beside it in the same order: a
 * label that has no room at its spot moves along, and its stem bends to it.
 */
export function layoutUpright(plan: BeamPlan): BeamLayout {
  const { style, width } = plan;
  const labelWidth = width - LABELS_X_PX - MARGIN_PX;
  const labels = plan.items.map((item) => composeLabel(item, labelWidth, style));
  const hung = labels.reduce((total, label) => total + label.height + GAP_PX, 0);

  const statement = plan.noneDescribes
    ? statementBlock({ x: MARGIN_PX, top: 4, width: width - 2 * MARGIN_PX }, style)
    : null;
  const top = (statement === null ? 6 : statement.box.height + 4) + 14;
  const length = Math.max(LEAST_LENGTH_PX, hung);
  const scale = beamScale(
    plan.items.map((item) => item.log10BayesFactor),
    length,
  );
  const bottom = top + length;
  const frame = { x: MARGIN_PX, top: bottom + 20, width: width - 2 * MARGIN_PX };
  const legend = legendLines(false, frame, style);
  const beam = { x: BEAM_X_PX };

  return {
    width,
    height: frame.top + legend.length * style.lineHeight + 4,
    direction: "upright",
    beam: { from: { ...beam, y: top + scale.leader }, to: { ...beam, y: bottom } },
    beyond:
      scale.leader > 0
        ? { from: { ...beam, y: top + scale.leader }, to: { ...beam, y: top } }
        : null,
    bands: categoryStretches(scale).map(({ from, words, near, far }) => ({
      from,
      words,
      box: { x: BEAM_X_PX - 14, y: top + near, width: width - BEAM_X_PX + 14, height: far - near },
      label: null,
    })),
    ticks: placeTicks(scale, style, top),
    marks: hangMarks(plan, labels, { scale, top, length }),
    statement,
    legend,
  };
}

function hangMarks(
  plan: BeamPlan,
  labels: Label[],
  at: { scale: BeamScale; top: number; length: number },
): BeamMark[] {
  const stretches = plan.items.map((item) => spotStretch(item, at.scale, at.length));
  const tops = spread(
    labels.map((label, index) => ({
      wanted: (stretches[index]?.at ?? 0) - label.height / 2,
      size: label.height + GAP_PX,
    })),
    at.length,
  );
  return plan.items.flatMap((item, index) => {
    const [label, stretch, offset] = [labels[index], stretches[index], tops[index]];
    if (label === undefined || stretch === undefined || offset === undefined) return [];
    const { box, lines } = placeLabel(label, { x: LABELS_X_PX, y: at.top + offset }, plan.style);
    const [y, middle] = [at.top + stretch.at, box.y + box.height / 2];
    return [
      {
        key: item.key,
        title: item.title,
        role: item.role,
        index: item.index,
        leads: item.leads,
        spot: {
          x: BEAM_X_PX - SPOT_PX / 2,
          y: at.top + stretch.from,
          width: SPOT_PX,
          height: stretch.to - stretch.from,
        },
        stem: [
          { x: BEAM_X_PX + BEAM_PX / 2, y },
          { x: BEAM_X_PX + 12, y },
          { x: LABELS_X_PX - 8, y: middle },
          { x: LABELS_X_PX, y: middle },
        ],
        label: box,
        lines,
      },
    ];
  });
}

function placeTicks(scale: BeamScale, style: LabelStyle, top: number): BeamTick[] {
  const taken: Box[] = [];
  const ticks: BeamTick[] = [];
  for (const { value, text, category } of tickCandidates(scale.reach)) {
    const y = top + scale.at(value);
    const reach = BEAM_PX / 2 + 4;
    const textWidth = style.measure(text, style.fontSize, false);
    const x = BEAM_X_PX - reach - 4 - textWidth;
    const label = placeText(text, { x, top: y - style.lineHeight / 2, style });
    const free = x >= 0 && !taken.some((box) => overlap(box, label.box));
    if (free) taken.push(label.box);
    if (!free && !category) continue;
    ticks.push({
      value,
      from: { x: BEAM_X_PX - reach, y },
      to: { x: BEAM_X_PX + reach, y },
      label: free ? label : null,
    });
  }
  return ticks;
}
