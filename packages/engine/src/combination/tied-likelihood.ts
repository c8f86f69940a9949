import { evidence } from "../evidence";
import type { NormalRole } from "../frame";
import { onlyMeasurand, type Workspace } from "../workspace";
import { interpolatedLog } from "./interpolated-log";
import type { Likelihood } from "./true-value-density";

/**
 * All measurements' likelihood of the level where they hang together: the evidence that a prediction
 * of exactly that level would have, with shared errors and correlated noises integrated out.
 *
 * @param apart the likelihoods as if they were apart, for where to look
 */
export function tiedLikelihood(
  workspace: Workspace,
  measurand: number,
  apart: readonly Likelihood[],
): Likelihood {
  const centres = apart.map(({ centre }) => centre);
  const scale = Math.max(...apart.map((one) => one.scale));
  const ln = interpolatedLog((level) => exactEvidence(workspace, measurand, level), {
    centre: centres[0]!,
    scale,
  });
  return { ln, centre: centres[0]!, scale, breaks: centres.slice(1) };
}

function exactEvidence(workspace: Workspace, measurand: number, level: number): number {
  const { frame } = workspace;
  const exact: NormalRole = { kind: "normal", mean: level, sd: 0, noise: 0 };
  const measurands = frame.measurands.with(measurand, {
    ...frame.measurands[measurand]!,
    roles: [exact],
  });
  const alone: Workspace = {
    ...workspace,
    frame: { ...frame, measurands },
    evidences: new Map(),
    general: new Map(),
    fits: new Map(),
  };
  const { ln } = evidence(alone, onlyMeasurand(alone, measurand, 0));
  return Number.isFinite(ln) ? ln : -Infinity;
}
