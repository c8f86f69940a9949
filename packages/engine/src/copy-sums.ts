import { indexSums, type MeasurandSums, type Sums } from "./sums";

/**
 * A copy that readings of some measurands can be added to; what is of others is shared with the sums
 * given, which stay as they are.
 */
export function copySums(sums: Sums, touched: ReadonlySet<number>): Sums {
  return indexSums({
    draws: [...sums.draws],
    patterns: [...sums.patterns],
    firsts: new Set(sums.firsts),
    measurands: sums.measurands.map((one, m) => (touched.has(m) ? copyMeasurand(one) : one)),
  });
}

function copyMeasurand(one: MeasurandSums): MeasurandSums {
  return {
    ...one,
    patterns: [...one.patterns],
    counts: [...one.counts],
    wear: [...one.wear],
    sums: one.sums.slice(),
    kept: [...one.kept],
    curves: one.curves.map((group) => ({
      ...group,
      draws: [...group.draws],
      systems: group.systems.map((system) => system && { ...system, data: system.data.slice() }),
    })),
  };
}
