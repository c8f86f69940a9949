import { ownSlots, type Frame, type PredictionFrame, type Role } from "../frame";

/**
 * The unknowns that all of a measurand's rows share under a role, by key, beside the shared errors
 * that they load. The same key is the same unknown wherever it comes up.
 */
export function sharedUnknowns(frame: Frame, measurand: number, role: Role): string[] {
  switch (role.kind) {
    case "normal":
      return role.sd > 0 ? [levelKey(measurand)] : [];
    case "uniform":
    case "polynomial":
      return [levelKey(measurand)];
    case "predicted":
      return ofPrediction(frame, role.prediction);
    default:
      return [];
  }
}

/** A level, an offset common to all, a smooth process or a polynomial: a measurand has one of them. */
export function levelKey(measurand: number): string {
  return `level ${measurand}`;
}

export function parameterKey(hypothesis: number, parameter: number): string {
  return `parameter ${hypothesis} ${parameter}`;
}

export function ensembleKey(hypothesis: number): string {
  return `ensemble ${hypothesis}`;
}

function ofPrediction(frame: Frame, prediction: PredictionFrame): string[] {
  const keys = expectedUnknowns(frame, prediction);
  const { tolerance, hypothesis, measurand } = prediction;
  const { predictions, toleranceCorrelations } = frame.hypotheses[hypothesis]!;
  const shares =
    tolerance.family === "splitNormal" || ("sharing" in tolerance && tolerance.sharing !== "each");
  if (shares) keys.push(levelKey(measurand));
  toleranceCorrelations.forEach(({ a, b }, i) => {
    const ends = [predictions[a]!.measurand, predictions[b]!.measurand];
    if (ends.includes(measurand)) keys.push(`correlation ${hypothesis} ${i}`);
  });
  return keys;
}

/** Free parameters and the ensemble, as far as what is expected hangs on them. */
export function expectedUnknowns(
  frame: Frame,
  { expectation, hypothesis }: PredictionFrame,
): string[] {
  if (expectation === null) return [];
  const said = frame.hypotheses[hypothesis]!;
  const keys: string[] = [];
  for (const slot of expectation.uses) {
    if (slot >= ownSlots(said)) continue;
    const parameter = said.parameters[slot];
    if (parameter === undefined) keys.push(ensembleKey(hypothesis));
    else if (parameter.prior.family !== "fixed") keys.push(parameterKey(hypothesis, slot));
  }
  return [...new Set(keys)];
}
