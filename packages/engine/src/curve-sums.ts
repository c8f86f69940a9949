import { createSystem } from "@weighhouse/numerics/triangular-system";

import type { DesignRow, FixedDesign, MeasurandFrame } from "./frame";
import { insertRow, removeRow } from "./row-updates";

/**
 * A curve's readings of one batch, or of none, as a triangular factor per role that has a fixed
 * design: |R x - z|^2 + rss over x = (the design's columns, then draws).
 */
export interface CurveGroup {
  batch: string | null;
  /** Of the shared errors, in the order in which they came. */
  draws: number[];
  count: number;
  /** How often rounding errors may have grown by what was taken out; 0: nothing was. */
  wear: number;
  systems: (RoleSystem | null)[];
}

export interface RoleSystem {
  size: number;
  data: Float64Array;
  rss: number;
  /** Sum of ln v, v with what the role adds. */
  logVariance: number;
  /** Readings where what is expected has no value: they are in no row. */
  impossible: number;
}

/** A reading as the factors take it; `y` is counted from `centre`. */
export interface CurveReading {
  y: number;
  centre: number;
  variance: number;
  conditions: readonly number[];
  /** Different ones. */
  draws: readonly number[];
  loadings: readonly number[];
}

export function createCurveGroup({ designs }: MeasurandFrame, batch: string | null): CurveGroup {
  const systems = designs.map((design) => (design === null ? null : emptySystem(design)));
  return { batch, draws: [], count: 0, wear: 0, systems };
}

function emptySystem({ columns }: FixedDesign): RoleSystem {
  return { ...createSystem(columns.length), logVariance: 0, impossible: 0 };
}

/** O(k^2) a role, by rotations. */
export function addToGroup(
  group: CurveGroup,
  reading: CurveReading,
  { designs }: Pick<MeasurandFrame, "designs">,
): void {
  for (const draw of reading.draws) if (!group.draws.includes(draw)) addDraw(group, draw);
  group.count += 1;
  group.systems.forEach((system, role) => {
    if (system === null) return;
    const equation = equationOf(group, reading, { design: designs[role]!, size: system.size });
    if (equation === null) system.impossible += 1;
    else {
      system.logVariance += equation.logVariance;
      insertRow(system, equation.row);
    }
  });
}

/**
 * Takes a reading out again, O(k^2) a role.
 *
 * @returns what the wear of the group is after it; Infinity where only a new start will do
 */
export function takeFromGroup(
  group: CurveGroup,
  reading: CurveReading,
  { designs }: Pick<MeasurandFrame, "designs">,
): number {
  group.count -= 1;
  let most = 1;
  group.systems.forEach((system, role) => {
    if (system === null) return;
    const equation = equationOf(group, reading, { design: designs[role]!, size: system.size });
    if (equation === null) system.impossible -= 1;
    else {
      system.logVariance -= equation.logVariance;
      most = Math.max(most, removeRow(system, equation.row, group.count));
    }
  });
  group.wear = (group.wear + 1) * most;
  return group.wear;
}

function addDraw(group: CurveGroup, draw: number): void {
  group.draws.push(draw);
  for (const system of group.systems) {
    if (system === null) continue;
    const { size, data } = system;
    const wider = createSystem(size + 1);
    for (let i = 0; i < size; i += 1) {
      const row = data.subarray(i * (size + 1), (i + 1) * (size + 1));
      wider.data.set(row.subarray(0, size), i * (size + 2));
      wider.data[i * (size + 2) + size + 1] = row[size]!;
    }
    system.size = wider.size;
    system.data = wider.data;
  }
}

/** In standard deviations: what is larger has no square. */
const MOST_SIZE = 1e150;

/** Of unit variance; null where what is expected has no value, or is nothing that can be reckoned with. */
function equationOf(
  { draws }: CurveGroup,
  reading: CurveReading,
  { design, size }: { design: FixedDesign; size: number },
): { row: Float64Array; logVariance: number } | null {
  const row = new Float64Array(size + 1);
  const own = size - draws.length;
  const into: DesignRow = { coefficients: row.subarray(0, own), base: 0, variance: 0 };
  design.put(reading.conditions, reading.centre, into);
  if (!Number.isFinite(into.base)) return null;
  reading.draws.forEach((draw, d) => (row[own + draws.indexOf(draw)] = reading.loadings[d]!));
  row[size] = reading.y - into.base;
  const variance = reading.variance + into.variance;
  const weight = 1 / Math.sqrt(variance);
  for (let c = 0; c <= size; c += 1) {
    row[c]! *= weight;
    if (!(Math.abs(row[c]!) < MOST_SIZE)) return null;
  }
  return { row, logVariance: Math.log(variance) };
}
