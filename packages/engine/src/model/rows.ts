import type { Role } from "../frame";
import { isFactored, type Loading, type Reading } from "../readings";
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
  const result: RoleRows = { rows: [], ln: 0, squares: 0, counted: 0 };
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
  const place = frame.measurands[measurand]!.roles.indexOf(role);
  const factored = (frame.measurands[measurand]!.designs[place] ?? null) !== null;
  if (factored) addFactors(workspace, { measurand, role: place, result });
  const extra = scatterVariance + noise;
  for (const reading of own.kept) {
    const { form } = reading.told;
    if (factored && isFactored(frame, reading)) continue;
    // Counts and events have no row: they are factors of their own.
    if (form !== "count" && form !== "event") {
      result.rows.push(keptRow(workspace, reading, extra));
    }
  }
  const ofVector = derived.measurands.indexOf(measurand);
  if (ofVector >= 0) result.rows.push(derivedRow(workspace, ofVector, noise));
  return result;
}

/**
 * A curve's readings as the rows of their triangular factors, which are equations of unit variance:
 *
 *   prod N(y_i; mu_i, v_i) = prod (2 pi v_i)^(-1/2) exp(-(|R x - z|^2 + rss) / 2)
 */
function addFactors(
  { sums }: Workspace,
  { measurand, role, result }: { measurand: number; role: number; result: RoleRows },
): void {
  for (const { draws, systems, count } of sums.measurands[measurand]!.curves) {
    const { size, data, rss, logVariance, impossible } = systems[role]!;
    const own = size - draws.length;
    result.squares += rss;
    result.ln -= logVariance / 2;
    result.counted += count;
    let rows = 0;
    for (let i = 0; i < size; i += 1) {
      const row = data.subarray(i * (size + 1), (i + 1) * (size + 1));
      if (row[i] === 0) continue;
      rows += 1;
      const loaded = draws.map((draw, d) => ({ draw, value: row[own + d]! }));
      const loads = loaded.filter(({ value }) => value !== 0).sort((a, b) => a.draw - b.draw);
      result.rows.push({
        ...NOTHING,
        measurand,
        observed: row[size]!,
        variance: 1,
        draws: loads.map(({ draw }) => draw),
        loadings: loads.map(({ value }) => value),
        relative: loads.map(() => false),
        factored: { coefficients: row.subarray(0, own), impossible: false },
        count: 0,
      });
    }
    if (impossible > 0) {
      result.rows.push({
        ...NOTHING,
        measurand,
        observed: 0,
        variance: 1,
        draws: [],
        loadings: [],
        relative: [],
        factored: { coefficients: new Float64Array(own), impossible: true },
        count: 0,
      });
    }
    result.ln -= ((count - rows) * LN_2PI + rss) / 2;
  }
}

const NOTHING = { told: null, extra: 0, conditions: [], id: null, factored: null };

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
    factored: null,
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
