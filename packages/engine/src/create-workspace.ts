import { couplingDraws } from "./blocks";
import type { Frame } from "./frame";
import { createMarginals } from "./marginal";
import { correlationGroups } from "./model/correlated-noise";
import { drawIndex, type Sums } from "./sums";
import type { DerivedVector, Workspace } from "./workspace";

/** @param sums of readings; derived values come in by `enterDerived` */
export function createWorkspace(frame: Frame, sums: Sums): Workspace {
  const groups = correlationGroups(frame.document.correlations);
  return {
    frame,
    sums,
    marginals: createMarginals(sums),
    coupling: couplingDraws(sums),
    evidences: new Map(),
    derived: {
      measurands: [],
      values: new Float64Array(),
      covariance: new Float64Array(),
      loadings: [],
    },
    correlationGroups: groups,
    ties: correlatedMeasurands(sums, groups),
    general: new Map(),
    fits: new Map(),
  };
}

/** Per group of correlated measurements, their measurands. */
function correlatedMeasurands({ measurands }: Sums, groups: Map<string, number>): number[][] {
  if (groups.size === 0) return [];
  const tied = new Map<number, Set<number>>();
  measurands.forEach(({ kept }, measurand) => {
    for (const { id } of kept) {
      const group = groups.get(id);
      if (group === undefined) continue;
      const there = tied.get(group);
      if (there === undefined) tied.set(group, new Set([measurand]));
      else there.add(measurand);
    }
  });
  return [...tied.values()].map((some) => [...some]).filter((some) => some.length > 1);
}

/** Puts the derived values in, before anything is scored. */
export function enterDerived(workspace: Workspace, derived: DerivedVector): void {
  workspace.derived = derived;
  const { measurands, loadings } = derived;
  if (measurands.length > 1) workspace.ties.push(measurands);
  loadings.forEach((own, place) => {
    for (const { error, batch } of own) {
      const draw = drawIndex(workspace.sums, { error, batch });
      const by = workspace.coupling.get(draw) ?? measurandsOf(workspace.sums, draw);
      workspace.coupling.set(draw, [...by, measurands[place]!]);
    }
  });
}

/** The measurands whose readings load a draw. */
function measurandsOf(sums: Sums, draw: number): number[] {
  return sums.measurands.flatMap(({ patterns, kept, curves }, measurand) => {
    const summed =
      patterns.some((pattern) => sums.patterns[pattern]!.draws.includes(draw)) ||
      curves.some(({ draws }) => draws.includes(draw));
    const { error, batch } = sums.draws[draw]!;
    const loads = kept.some(({ loadings }) =>
      loadings.some((one) => one.error === error && one.batch === batch),
    );
    return summed || loads ? [measurand] : [];
  });
}
