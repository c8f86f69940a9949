import { compileSlots } from "@weighhouse/campaign/expression";
import { designOf } from "@weighhouse/campaign/expression-linearity";
import type {
  DesignColumn,
  FixedDesign,
  HypothesisFrame,
  MeasurandFrame,
  PolynomialRole,
  PredictionFrame,
  Role,
} from "../frame";
import { ownSlots } from "../frame";
import { isLogged } from "../log-parameters";
import { toScoringSpace } from "../scoring-space";
import { LEAST_SD } from "../sizes";
import { legendre } from "./legendre";
import { linearIn, linearUnknown } from "./parameters";
import { levelKey, parameterKey } from "./shared-unknowns";

/** Of a curve's roles; none where readings aren't on a line. */
export function designsOf(
  frame: MeasurandFrame,
  measurand: number,
  hypotheses: readonly HypothesisFrame[],
): (FixedDesign | null)[] {
  const { curve, scale, period, roles } = frame;
  if (!curve || period > 0 || scale === "event" || scale === "count") return [];
  return roles.map((role) => designOfRole(role, { frame, measurand, hypotheses }));
}

interface Context {
  frame: MeasurandFrame;
  measurand: number;
  hypotheses: readonly HypothesisFrame[];
}

function designOfRole(role: Role, context: Context): FixedDesign | null {
  const { frame, measurand } = context;
  const key = levelKey(measurand);
  const noise = "noise" in role ? frame.scatterVariance + frame.noises[role.noise]! : 0;
  switch (role.kind) {
    case "normal": {
      const { mean, sd } = role;
      const columns: DesignColumn[] = sd > 0 ? [{ key, kind: "normal", origin: mean, sd }] : [];
      return level(columns, noise, (centre) => mean - centre);
    }
    case "uniform": {
      const { lower, upper, width } = role;
      if (width < LEAST_SD) return level([], noise, (centre) => lower - centre);
      return level([{ key, kind: "flat", lower, upper, width }], noise, () => 0);
    }
    case "polynomial":
      return polynomial(role, measurand, noise);
    case "predicted":
      return predicted(role.prediction, context);
    default:
      return null;
  }
}

function level(
  columns: DesignColumn[],
  variance: number,
  baseFrom: (centre: number) => number,
): FixedDesign {
  return {
    columns,
    put: (_, centre, into) => {
      into.coefficients.fill(1);
      into.base = baseFrom(centre);
      into.variance = variance;
    },
  };
}

function polynomial(role: PolynomialRole, measurand: number, variance: number): FixedDesign {
  const { condition, sd } = role;
  return {
    columns: Array.from({ length: role.degree + 1 }, (_, n) => ({
      key: `coefficient ${measurand} ${n}`,
      kind: "normal",
      origin: 0,
      sd,
    })),
    put: (conditions, centre, into) => {
      legendre(role, conditions[condition]!, into.coefficients);
      into.base = role.centre - centre;
      into.variance = variance;
    },
  };
}

/** Null where something said of each reading, or of the unknowns, isn't linear and normal. */
function predicted(prediction: PredictionFrame, context: Context): FixedDesign | null {
  const { tolerance, expectation, measurand } = prediction;
  const { frame, hypotheses } = context;
  const said = hypotheses[prediction.hypothesis]!;
  const columns: DesignColumn[] = parameterColumns(prediction, context) ?? [];
  if (expectation !== null && columns.length < freeSlots(prediction, said).length) return null;
  const key = levelKey(measurand);
  switch (tolerance.family) {
    case "exact":
      break;
    case "splitNormal":
      columns.push({ key, kind: "split", plus: tolerance.plus, minus: tolerance.minus });
      break;
    case "normal":
      if (tolerance.sharing === "smooth" || (tolerance.relative && columns.length > 0)) return null;
      if (tolerance.sharing === "common") {
        columns.push({ key, kind: "normal", origin: 0, sd: tolerance.sd });
      }
      break;
    default:
      return null;
  }
  const expected = expectedBy(prediction, said, frame, columns);
  const relative = tolerance.family === "normal" && tolerance.relative;
  const own = tolerance.family === "normal" && tolerance.sharing === "each" ? tolerance.sd : 0;
  const last = columns.length - 1;
  const shared = columns[last]?.key === key;
  return {
    columns,
    put: (conditions, centre, into) => {
      const natural = expected(conditions, into.coefficients);
      const size = relative ? Math.abs(natural) : 1;
      if (shared) into.coefficients[last] = size;
      into.base = toScoringSpace(natural, frame.scale) - centre;
      into.variance = frame.scatterVariance + (own * size) ** 2;
    },
  };
}

/** The free parameters and columns that what is expected hangs on. */
function freeSlots({ expectation }: PredictionFrame, said: HypothesisFrame): number[] {
  return (expectation?.uses ?? []).filter(
    (slot) => slot < ownSlots(said) && said.parameters[slot]?.prior.family !== "fixed",
  );
}

/** One for each free parameter that enters linearly, together with the others. */
function parameterColumns(prediction: PredictionFrame, { frame, hypotheses }: Context) {
  if (prediction.expectation === null) return null;
  const said = hypotheses[prediction.hypothesis]!;
  const role: Role = { kind: "predicted", prediction };
  const part = { measurand: prediction.measurand, role, reference: false };
  const linear = linearIn({ parts: [part], rows: [] }, said, {
    bars: () => false,
    scaleOf: () => frame.scale,
  });
  return freeSlots(prediction, said).flatMap((slot): DesignColumn[] => {
    if (!linear.has(slot)) return [];
    const key = parameterKey(prediction.hypothesis, slot);
    return [{ key, kind: "parameter", slot, ...linearUnknown(said.parameters[slot]!.prior) }];
  });
}

/**
 * What is expected in the observable's unit, every parameter where it counts from; fills the
 * parameters' coefficients.
 */
function expectedBy(
  { expectation, natural }: PredictionFrame,
  said: HypothesisFrame,
  frame: MeasurandFrame,
  columns: readonly DesignColumn[],
): (conditions: readonly number[], coefficients: Float64Array) => number {
  if (expectation === null) return () => natural!;
  const { slots, inLogs } = expectation;
  const parameters = columns.flatMap((one) => (one.kind === "parameter" ? [one] : []));
  const names = parameters.map(({ slot }) => slots[slot]!);
  const { slopes } = designOf(inLogs, names, frame.scale === "log10");
  const slopesOf = names.map((name) => compileSlots(slopes.get(name)!, slots));
  const values = new Float64Array(slots.length);
  said.parameters.forEach(({ prior }, slot) => {
    if (prior.family === "fixed") values[slot] = prior.value;
  });
  for (const { slot, from } of parameters) values[slot] = from;
  const inLog = values.slice();
  said.parameters.forEach((parameter, slot) => {
    if (isLogged(parameter)) inLog[slot] = Math.log10(values[slot]!);
  });
  const begin = ownSlots(said);
  return (conditions, coefficients) => {
    for (let slot = begin; slot < slots.length; slot += 1) {
      values[slot] = conditions[slot - begin]!;
      inLog[slot] = values[slot]!;
    }
    for (let c = 0; c < slopesOf.length; c += 1) coefficients[c] = slopesOf[c]!(inLog);
    return expectation.evaluate(values);
  };
}
