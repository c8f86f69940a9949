import { normalCdf, normalInterval } from "@weighhouse/numerics/normal";
import type { VerdictWord } from "@weighhouse/campaign/standings";
import { fit, type Fit } from "./chi-square-fit";
import { combine } from "./combination";
import { evidence } from "./evidence";
import type { PredictionFrame } from "./frame";
import { onlyMeasurand, type Combination, type Workspace } from "./workspace";

/** Below this the measurements of a measurand disagree with one another. */
export const DISAGREEING = 0.01;
const PASS_P = 0.05;
const FAIL_P = 0.0027;
const CERTAIN_FAIL_P = 5.7e-7;
const LN_SQRT_10 = Math.LN10 / 2;

/** In scoring space. */
export interface Verdict {
  word: VerdictWord;
  conformance: number | null;
  tension: number | null;
  value: number | null;
  sd: number | null;
  inflated: boolean;
}

/** A prediction against its measurand's measurements (section 7, JCGM 106:2012). */
export function verdictOf(workspace: Workspace, prediction: PredictionFrame): Verdict {
  const combination = combine(workspace, prediction.measurand);
  if (workspace.frame.measurands[prediction.measurand]!.closed) return unmeasured("notMeasured");
  if (combination === null) return unmeasured("awaiting");
  const roles = onlyMeasurand(workspace, prediction.measurand, prediction.role);
  const own = fit(workspace, roles)!;
  return prediction.sd! > 0
    ? ofInterval(workspace, prediction, { combination, own })
    : ofExact(workspace, prediction, { combination, own });
}

/** A sealed prediction: what was measured is shown, what was predicted isn't known. */
export function verdictOfWithheld(workspace: Workspace, measurand: number): Verdict {
  const combination = combine(workspace, measurand);
  if (workspace.frame.measurands[measurand]!.closed) return unmeasured("notMeasured");
  if (combination === null) return unmeasured("awaiting");
  const { value, sd } = combination;
  return { ...unmeasured("withheld"), value, sd };
}

function unmeasured(word: VerdictWord): Verdict {
  return { word, conformance: null, tension: null, value: null, sd: null, inflated: false };
}

interface Measured {
  combination: Combination;
  own: Fit;
}

function ofInterval(
  { frame }: Workspace,
  { expected, sd: tolerance, interval }: PredictionFrame,
  { combination, own }: Measured,
): Verdict {
  const { lower, upper } = interval!;
  const { value, birgeRatio, pValue } = combination;
  const inflated = pValue !== null && pValue < DISAGREEING;
  const sd = inflated ? combination.sd * birgeRatio! : combination.sd;
  const conformance = normalInterval((lower - value) / sd, (upper - value) / sd);
  const above = normalCdf((value - upper) / sd);
  const below = normalCdf((lower - value) / sd);
  const { rule } = frame.document.campaign;
  const beyond = Math.max(above, below);
  const fails =
    own.pValue === null
      ? beyond >= 1 - rule.fail / 5
      : beyond >= 1 - rule.fail && own.pValue < 0.01;
  const word = conformance >= rule.pass ? "pass" : fails ? "fail" : "undecided";
  const tension = (value - expected!) / Math.hypot(sd, tolerance!);
  return { word, conformance, tension, value, sd, inflated };
}

function ofExact(
  workspace: Workspace,
  { expected, measurand, role }: PredictionFrame,
  { combination: { value, sd }, own }: Measured,
): Verdict {
  const lnB =
    evidence(workspace, onlyMeasurand(workspace, measurand, role)).ln -
    evidence(workspace, onlyMeasurand(workspace, measurand, 0)).ln;
  const tension = (value - expected!) / sd;
  const word = wordForExact(own.pValue, lnB);
  return { word, conformance: null, tension, value, sd, inflated: false };
}

function wordForExact(p: number | null, lnB: number): VerdictWord {
  if (p === null) {
    if (lnB >= Math.LN10) return "pass";
    return lnB <= -Math.LN10 ? "fail" : "undecided";
  }
  if (p >= PASS_P && lnB >= LN_SQRT_10) return "pass";
  if ((p < FAIL_P && lnB <= -LN_SQRT_10) || p < CERTAIN_FAIL_P) return "fail";
  return "undecided";
}
