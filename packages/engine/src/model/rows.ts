import type { Role } from "../frame";
import type { Loading, Reading } from "../readings";
import { drawIndex, LOG_VARIANCE, MEAN, placeOf, SQUARES, WEIGHT } from "../sums";
import type { Workspace } from "../workspace";
import type { RoleRows, Row } from "./block-parts";

const LN_2PI = 1.8378770664093453;

/** What a measurand's rows are counted from. */
export function centreOf({ sums, derived }: Workspace, measurand: number): number {
  const place = derived.measurands.indexOf(measurand);
  return place < 0 ? sums.measurands[measurand]!.centre : derived.values[place]!;
}

/** The variance that a role adds to each measurement, where it is one number. */
export function noiseOf({ frame }: Workspace, measurand: number, role: Role): number {
  const { noises } = frame.measurands[measurand]!;
  switch (role.kind) {
    case "normal":
    case "uniform":
    case "polynomial":
      return noises[role.noise]!;
    case "predicted": {
      const { tolerance } = role.prediction;
      if (tolerance.family !== "normal" || tolerance.sharing !== "each" || tolerance.relative) {
        return 0;
      }
      return tolerance.sd * tolerance.sd;
    }
    default:
      return 0;
  }
}

/**
 * A measurand's rows. Readings that went into the sums are one row for each of their groups:
 *
 *   prod N(y_i; mu, v_i) = N(mean; mu, 1/W) x what hangs on no mu,   W = sum 1/v_i
 */
export function rowsOf(workspace: Workspace, measurand: number, role: Role): RoleRows {
  const { frame, sums, derived } = workspace;
  const own = sums.measurands[measurand]!;
  const { noises, scatterVariance } = frame.measurands[measurand]!;
  const noise = noiseOf(workspace, measurand, role);
  const result: RoleRows = { rows: [], ln: 0, squares: 0 };
  const noiseClass = noises.indexOf(noise);
  own.patterns.forEach((place, group) => {
    const { draws, loadings, relative } = sums.patterns[place]!;
    const at = placeOf(own, group, noiseClass);
    const weight = own.sums[at + WEIGHT]!;
    const squares = own.sums[at + SQUARES]!;
    const count = own.counts[group]!;
    result.ln -=
      ((count - 1) * LN_2PI + own.sums[at + LOG_VARIANCE]! + Math.log(weight) + squares) / 2;
    result.squares += squares;
    result.rows.push({
      ...NOTHING,
      measurand,
      observed: own.sums[at + MEAN]!,
      variance: 1 / weight,
      draws,
      loadings,
      relative,
      count,
    });
  });
  const extra = scatterVariance + noise;
  for (const reading of own.kept) {
    const { form } = reading.told;
    // Counts and events have no row: they are factors of their own.
    if (form !== "count" && form !== "event") {
      result.rows.push(keptRow(workspace, reading, extra));
    }
  }
  const place = derived.measurands.indexOf(measurand);
  if (place >= 0) result.rows.push(derivedRow(workspace, place, noise));
  return result;
}

const NOTHING = { told: null, extra: 0, conditions: [], id: null };

function keptRow(workspace: Workspace, reading: Reading, extra: number): Row {
  const { told, measurand, conditions, id } = reading;
  const variance = "variance" in told ? told.variance : 0;
  return {
    measurand,
    told,
    observed: "y" in told ? told.y - centreOf(workspace, measurand) : 0,
    variance: variance + extra,
    extra,
    ...drawsOf(workspace, reading.loadings),
    conditions,
    id: workspace.frame.correlated.has(id) ? id : null,
    count: 1,
  };
}

function derivedRow(workspace: Workspace, place: number, noise: number): Row {
  const { measurands, covariance, loadings } = workspace.derived;
  const own = covariance[place * measurands.length + place]!;
  return {
    ...NOTHING,
    measurand: measurands[place]!,
    observed: 0,
    variance: own + noise,
    extra: noise,
    ...drawsOf(workspace, loadings[place]!),
    count: 1,
  };
}

/** Loadings by draw; those of one draw are added up, and those that cancel are left out. */
function drawsOf(
  { sums }: Workspace,
  loadings: readonly Loading[],
): Pick<Row, "draws" | "loadings" | "relative"> {
  const values = new Map<number, { value: number; relative: boolean }>();
  for (const { error, batch, value, relative } of loadings) {
    const draw = drawIndex(sums, { error, batch });
    values.set(draw, { value: (values.get(draw)?.value ?? 0) + value, relative });
  }
  const pairs = [...values].filter(([, { value }]) => value !== 0).sort(([a], [b]) => a - b);
  return {
    draws: pairs.map(([draw]) => draw),
    loadings: pairs.map(([, { value }]) => value),
    relative: pairs.map(([, { relative }]) => relative),
  };
}
