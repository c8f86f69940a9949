import type { Prediction, Table } from "@weighhouse/campaign/document";
import { constantExpected } from "@weighhouse/campaign/expression";
import type { Result } from "@weighhouse/campaign/problem";
import { noiseIndex, type MeasurandFrame, type PredictionFrame, type Role } from "./frame";
import { notYetSupported } from "./not-yet-supported";
import { toScoringSpace } from "./scoring-space";
import { MOST_SD } from "./sizes";

export interface PredictionContext {
  pointer: string;
  tables: readonly Table[];
  measurand: number;
  frame: MeasurandFrame;
  /** Half the width of a normal tolerance's interval, in its sd. */
  coverage: number;
}

/** A prediction in scoring space; adds its role to the measurand's. */
export function predictionFrame(
  prediction: Prediction,
  { pointer, tables, measurand, frame, coverage }: PredictionContext,
): Result<PredictionFrame> {
  const natural = constantExpected(prediction, tables);
  if (natural === null) {
    const found = prediction.expected === null ? "none" : `"${prediction.expected}"`;
    const allowed = "a number, or an expression of numbers only";
    return { ok: false, problems: [notYetSupported(`${pointer}/expected`, found, allowed)] };
  }
  const expected = toScoringSpace(natural, frame.scale);
  if (!Number.isFinite(expected)) {
    const allowed = frame.scale === "log10" ? "a number above 0" : "a finite number";
    const at = `${pointer}/expected`;
    return {
      ok: false,
      problems: [{ pointer: at, code: "out-of-range", found: String(natural), allowed }],
    };
  }
  const sd = toleranceSd(prediction, natural, frame);
  if (!(sd <= MOST_SD)) {
    const at = `${pointer}/tolerance/sd`;
    const allowed = `a tolerance of at most ${MOST_SD}`;
    return {
      ok: false,
      problems: [{ pointer: at, code: "out-of-range", found: String(sd), allowed }],
    };
  }
  const each = prediction.tolerance?.sharing === "each";
  const value: PredictionFrame = {
    pointer,
    measurand,
    role: roleIndex(frame, {
      kind: "normal",
      mean: expected,
      sd: each ? 0 : sd,
      noise: noiseIndex(frame, each ? sd * sd : 0),
    }),
    natural,
    expected,
    sd,
    lower: expected - coverage * sd,
    upper: expected + coverage * sd,
    decisive: prediction.decisive,
    registeredAt: prediction.registeredAt,
  };
  return { ok: true, value };
}

/** 0 for an exact prediction; a relative one is a fraction of |expected|, on log10 sd / ln 10 dex. */
function toleranceSd(prediction: Prediction, natural: number, { scale }: MeasurandFrame): number {
  const { tolerance } = prediction;
  if (tolerance?.family !== "normal") return 0;
  if (!tolerance.relative) return tolerance.sd;
  return scale === "log10" ? tolerance.sd / Math.LN10 : tolerance.sd * Math.abs(natural);
}

function roleIndex(frame: MeasurandFrame, role: Role): number {
  const there = frame.roles.findIndex(
    (other) =>
      other.kind === "normal" &&
      role.kind === "normal" &&
      other.mean === role.mean &&
      other.sd === role.sd &&
      other.noise === role.noise,
  );
  return there >= 0 ? there : frame.roles.push(role) - 1;
}
