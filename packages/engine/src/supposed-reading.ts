import type { VerdictWord } from "@weighhouse/campaign/standings";
import { evidence } from "./evidence";
import type { Frame, PredictionFrame } from "./frame";
import type { Reading, Told } from "./readings";
import { addReading, createSums } from "./sums";
import { verdictOf } from "./verdict";
import { onlyMeasurand, type Workspace } from "./workspace";
import { createWorkspace } from "./create-workspace";

/** The one measurement that a preview supposes. */
export interface Supposed {
  /** In the observable's unit, dex on log10; of no account for counts and events. */
  sd: number;
  exposure?: number;
  background?: number;
  efficiency?: number;
  falseAlarm?: number;
  /** On a curve, by the conditions' keys. */
  conditions?: Record<string, number>;
}

/** What such a measurement would make of a prediction. */
export interface Outcome {
  word(): VerdictWord;
  /** Against the reference. */
  log10B(): number;
}

/**
 * @param frame of one measurand
 * @param y in scoring space; a count, or 1 and 0 for an event that was reported or not
 */
export function outcomeOf(
  frame: Frame,
  prediction: PredictionFrame,
  { y, supposed }: { y: number; supposed: Supposed },
): Outcome {
  const sums = createSums(frame.measurands);
  addReading(sums, readingOf(frame, y, supposed), frame);
  const workspace: Workspace = createWorkspace(frame, sums);
  const ln = (role: number) => evidence(workspace, onlyMeasurand(workspace, 0, role)).ln;
  return {
    word: () => verdictOf(workspace, prediction).word,
    log10B: () => (ln(prediction.role) - ln(0)) / Math.LN10,
  };
}

function readingOf(frame: Frame, y: number, supposed: Supposed): Reading {
  const { conditions, curve } = frame.measurands[0]!;
  return {
    id: "supposed",
    measurand: 0,
    told: toldOf(frame, y, supposed),
    conditions: curve ? conditions.map((key) => conditionOf(frame, key, supposed)) : [],
    loadings: [],
    provisional: false,
    unknownUnit: null,
  };
}

function toldOf(frame: Frame, y: number, supposed: Supposed): Told {
  switch (frame.measurands[0]!.scale) {
    case "count": {
      const { exposure = 1, background = 0 } = supposed;
      return { form: "count", count: y, exposure, background };
    }
    case "event": {
      const { efficiency = 1, falseAlarm = 0 } = supposed;
      return { form: "event", occurred: y > 0, efficiency, falseAlarm };
    }
    default:
      return { form: "value", y, variance: supposed.sd ** 2 };
  }
}

/** The middle of the measurand's range where none is supposed; 0 where that is unbounded. */
function conditionOf(frame: Frame, key: string, { conditions = {} }: Supposed): number {
  const [lower, upper] = frame.document.measurands[0]!.where[key] ?? [null, null];
  return conditions[key] ?? ((lower ?? upper ?? 0) + (upper ?? lower ?? 0)) / 2;
}
