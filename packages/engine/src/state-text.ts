import type { CampaignDocument } from "@weighhouse/campaign/document";
import { compileFrame } from "./compile-frame";
import type { CurveGroup, RoleSystem } from "./curve-sums";
import type { EngineState } from "./engine-state";
import type { Reading } from "./readings";
import { indexSums, placeOf, type Draw, type MeasurandSums, type Pattern } from "./sums";
import type { Tally } from "./tally";
import { ENGINE_VERSION, STATE_VERSION } from "./version";

/** The state as JSON holds it: typed arrays as lists, maps as pairs, frames as their documents. */
interface StateText {
  engine: string;
  state: number;
  document: CampaignDocument;
  draws: Draw[];
  patterns: Pattern[];
  firsts: string[];
  measurands: (Omit<MeasurandSums, "sums" | "kept" | "curves"> & {
    sums: number[];
    kept: KeptText[];
    curves: CurveText[];
  })[];
  tally: Omit<Tally, "sameData" | "unknownUnits"> & {
    sameData: [string, Tally["sameData"] extends Map<string, infer V> ? V : never][];
    unknownUnits: [string, Tally["unknownUnits"] extends Map<string, infer V> ? V : never][];
  };
}

type CurveText = Omit<CurveGroup, "systems"> & {
  systems: ((Omit<RoleSystem, "data"> & { data: number[] }) | null)[];
};

/** A condition that wasn't given is NaN, which JSON has no number for. */
type KeptText = Omit<Reading, "conditions"> & { conditions: (number | null)[] };

/** JSON text; `restoreState` reads it back to the same numbers, bit for bit. */
export function serialiseState({ frame, sums, tally }: EngineState): string {
  const text: StateText = {
    engine: ENGINE_VERSION,
    state: STATE_VERSION,
    document: frame.document,
    draws: sums.draws,
    patterns: sums.patterns,
    firsts: [...sums.firsts],
    measurands: sums.measurands.map((one) => ({
      ...one,
      sums: [...one.sums.subarray(0, placeOf(one, one.patterns.length, 0))],
      curves: one.curves.map((group) => ({
        ...group,
        systems: group.systems.map((system) => system && { ...system, data: [...system.data] }),
      })),
    })),
    tally: {
      ...tally,
      sameData: [...tally.sameData],
      unknownUnits: [...tally.unknownUnits],
    },
  };
  return JSON.stringify(text);
}

/**
 * @param text what `serialiseState` wrote, and nobody else: it isn't checked further
 * @returns null when it was written by another engine or state version
 */
export function restoreState(text: string): EngineState | null {
  const { engine, state, document, draws, patterns, firsts, measurands, tally } = JSON.parse(
    text,
  ) as StateText;
  if (engine !== ENGINE_VERSION || state !== STATE_VERSION) return null;
  const frame = compileFrame(document);
  if (!frame.ok) return null;
  const sums = indexSums({
    draws,
    patterns,
    firsts: new Set(firsts),
    measurands: measurands.map((one) => ({
      ...one,
      sums: Float64Array.from(one.sums),
      curves: one.curves.map((group) => ({
        ...group,
        systems: group.systems.map(
          (system) => system && { ...system, data: Float64Array.from(system.data) },
        ),
      })),
      kept: one.kept.map((reading) => ({
        ...reading,
        conditions: reading.conditions.map((value) => value ?? Number.NaN),
      })),
    })),
  });
  return {
    frame: frame.value,
    sums,
    tally: {
      ...tally,
      sameData: new Map(tally.sameData),
      unknownUnits: new Map(tally.unknownUnits),
    },
  };
}
