import type { CubeIntegral, CubeMode, CubeNodes } from "./cube-integral";
import { KRONROD_RULE } from "./gauss-kronrod";
import { cutsAroundPeaks } from "./line-peaks";
import { panelOn, shareBelow, type Panel } from "./line-panels";

const MOST_PANELS = 2000;
/** Peaks of 1e-4 of the line, as much in them as in the flat rest, show at this spacing. */
const SCAN = 1280;
const SCAN_BESIDE_MODES = 96;
/** Nodes of less than e^-50 of the mass are left out of the posterior's points. */
const NEGLIGIBLE = 50;

export interface LineOptions {
  modes: readonly CubeMode[];
  breaks: readonly number[];
  relative: number;
  /** Points looked at in search of peaks; without it 1280, or 96 beside modes. */
  scan?: number;
  /** Asked before each halving. */
  mayGoOn?: () => boolean;
}

/**
 * ln of the integral of exp(f) over [0, 1], by Gauss-Kronrod panels in logs: the panel with the
 * largest error is halved until the errors add up to less than `relative` of the whole.
 *
 * @param f log density; -Infinity allowed
 * @param modes with a mode's hint peaks down to 1e-8 of the line are found, without to 1e-4
 * @param breaks kinks and steps; those that aren't told are halved in upon, at some 1500 calls each
 * @returns with `cdf`, right to 1e-9
 * Accuracy: 1e-9 in ln Z, 1e-11 typical; |f| eps where the log density is that coarse.
 */
export function lineIntegral(
  f: (x: number) => number,
  { modes, breaks, relative, scan, mayGoOn = () => true }: LineOptions,
): CubeIntegral {
  let evaluations = 0;
  const counted = (x: number) => {
    evaluations += 1;
    return f(x);
  };
  const points = scan ?? (modes.length > 0 ? SCAN_BESIDE_MODES : SCAN);
  const cuts = [...cutsAroundPeaks(counted, { modes, scan: points }), ...breaks, 0, 1]
    .filter((x) => x >= 0 && x <= 1)
    .sort((a, b) => a - b);
  const panels: Panel[] = [];
  for (let i = 1; i < cuts.length; i += 1) {
    if (cuts[i]! > cuts[i - 1]!) panels.push(panelOn(counted, cuts[i - 1]!, cuts[i]!));
  }
  const { top, value, error } = refine(counted, panels, { relative, mayGoOn });
  if (value === 0) {
    const nodes = { points: new Float64Array(0), lnWeights: new Float64Array(0) };
    return { ln: -Infinity, error: 0, evaluations, information: 0, nodes };
  }
  const ln = top + Math.log(value);
  panels.sort((a, b) => a.lower - b.lower);
  const { nodes, information } = nodesOf(panels, ln);
  return { ln, error: error / value, evaluations, information, nodes, cdf: cdfOf(panels, ln) };
}

/** Halves panels in place; the sums it returns are over exp(top). */
function refine(
  f: (x: number) => number,
  panels: Panel[],
  { relative, mayGoOn }: { relative: number; mayGoOn: () => boolean },
): { top: number; value: number; error: number } {
  for (;;) {
    let top = -Infinity;
    for (const panel of panels) if (panel.top > top) top = panel.top;
    if (top === -Infinity) return { top, value: 0, error: 0 };
    let value = 0;
    let error = 0;
    let worst = -1;
    let largest = 0;
    for (let i = 0; i < panels.length; i += 1) {
      const panel = panels[i]!;
      const scale = Math.exp(panel.top - top);
      value += panel.value * scale;
      error += panel.error * scale;
      const middle = (panel.lower + panel.upper) / 2;
      if (panel.error * scale > largest && middle > panel.lower && middle < panel.upper) {
        largest = panel.error * scale;
        worst = i;
      }
    }
    const noise = (8 + Math.abs(top)) * Number.EPSILON;
    const enough = Math.max(relative, 4 * noise) * value;
    if (error <= enough || worst < 0 || panels.length >= MOST_PANELS || !mayGoOn()) {
      return { top, value, error: error + noise * value };
    }
    const { lower, upper } = panels[worst]!;
    const middle = (lower + upper) / 2;
    panels[worst] = panelOn(f, lower, middle);
    panels.push(panelOn(f, middle, upper));
  }
}

function nodesOf(panels: readonly Panel[], ln: number): { nodes: CubeNodes; information: number } {
  const points: number[] = [];
  const lnWeights: number[] = [];
  let information = 0;
  let sum = 0;
  for (const { lower, upper, logs } of panels) {
    const half = (upper - lower) / 2;
    const centre = lower + half;
    for (let i = 0; i < 21; i += 1) {
      const lnWeight = logs[i]! + Math.log(KRONROD_RULE.kronrod[i]! * half) - ln;
      if (!(lnWeight > -NEGLIGIBLE)) continue;
      points.push(centre + half * KRONROD_RULE.nodes[i]!);
      lnWeights.push(lnWeight);
      sum += Math.exp(lnWeight);
      information += Math.exp(lnWeight) * (logs[i]! - ln);
    }
  }
  const nodes = {
    points: Float64Array.from(points),
    lnWeights: Float64Array.from(lnWeights, (lnWeight) => lnWeight - Math.log(sum)),
  };
  return { nodes, information: Math.max(0, information) };
}

function cdfOf(panels: readonly Panel[], ln: number): (axis: number, x: number) => number {
  const masses = panels.map(({ top, value }) => (value > 0 ? Math.exp(top - ln) * value : 0));
  return (_axis, x) => {
    let below = 0;
    for (let i = 0; i < panels.length; i += 1) {
      const panel = panels[i]!;
      if (x >= panel.upper) below += masses[i]!;
      else {
        if (x > panel.lower && masses[i]! > 0) below += masses[i]! * shareBelow(panel, x);
        break;
      }
    }
    return Math.min(below, 1);
  };
}
