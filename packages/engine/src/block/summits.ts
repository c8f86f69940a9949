import { logSumExp } from "@weighhouse/numerics/log-sum-exp";
import { LN_SQRT_2PI } from "@weighhouse/numerics/normal";
import type { Coordinate } from "./coordinates";
import { climb, isSame, lnScaleOf, type Landscape, type Mode } from "./modes";

/** Peaks so much lower than the highest, in nats, are of no use to a rule. */
const LOW = 60;
/** And those of so much less mass count for nothing. */
const LIGHT = 12;
/** Of climbs to peaks that count, at most this share may have led to one that no other led to. */
const MOST_ALONE = 0.25;

/** The peaks that climbs have led to so far. */
export interface Summits {
  climbFrom(starts: readonly Float64Array[]): void;
  /** Each once, the highest first. */
  highest(): Mode[];
  /**
   * Whether climbs lead again and again to the same peaks: the share of those that were led to once
   * estimates how much there is that none was led to (Good, Biometrika 40, 1953, 237).
   */
  areAllKnown(): boolean;
  /** ln of the integral over all that are known, as if each were normal. */
  lnMass(): number;
}

export function createSummits(
  lnDensity: (c: Float64Array) => number,
  coordinates: readonly Coordinate[],
): Summits {
  const landscape: Landscape = {
    ln: lnDensity,
    lower: Float64Array.from(coordinates, ({ lower }) => lower),
    upper: Float64Array.from(coordinates, ({ upper }) => upper),
    step: Float64Array.from(coordinates, ({ lower, upper }) => Math.min((upper - lower) / 10, 0.5)),
  };
  const found: { mode: Mode; times: number }[] = [];
  return {
    climbFrom: (starts) => {
      for (const start of starts) {
        const mode = climb(landscape, start);
        if (mode === null) continue;
        const known = found.find((one) => isSame(one.mode, mode));
        if (known === undefined) found.push({ mode, times: 1 });
        else known.times += 1;
      }
    },
    highest: () => {
      const modes = found.map(({ mode }) => mode).sort((a, b) => b.height - a.height);
      return modes.filter(({ height }) => height > modes[0]!.height - LOW);
    },
    areAllKnown: () => {
      const masses = found.map(({ mode }) => mode.height + lnScaleOf(mode));
      const largest = Math.max(...masses);
      const counting = found.filter((_, k) => masses[k]! > largest - LIGHT);
      const climbs = counting.reduce((sum, { times }) => sum + times, 0);
      const alone = counting.filter(({ times }) => times === 1).length;
      return climbs > 0 && alone <= MOST_ALONE * climbs;
    },
    lnMass: () =>
      logSumExp(
        found.map(({ mode }) => mode.height + lnScaleOf(mode) + mode.centre.length * LN_SQRT_2PI),
      ),
  };
}
