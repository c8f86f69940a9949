import type { CampaignDocument } from "@weighhouse/campaign/document";

/**
 * The baseline: ln N(y; f, D + WW') of one hypothesis by the whole N x N matrix and its Cholesky
 * factor, in one typed array. Silent measurands under their normal reference; uniform ones left out.
 */
export function plainDenseEvidence(document: CampaignDocument, hypothesis: number): number {
  const predictions = new Map(
    document.hypotheses[hypothesis]!.predictions.map((one) => [one.measurand, one]),
  );
  const models = new Map(
    document.measurands.flatMap(({ key, reference, scatter }) => {
      const prediction = predictions.get(key);
      if (prediction?.tolerance?.family === "normal") {
        const { sd, sharing } = prediction.tolerance;
        const [common, own] = sharing === "each" ? [0, sd * sd] : [sd * sd, 0];
        const noise = scatter * scatter + own;
        return [[key, { mean: prediction.expected as number, common, noise }] as const];
      }
      if (reference?.family !== "normal") return [];
      const noise = scatter * scatter + reference.scatter ** 2;
      return [[key, { mean: reference.mean, common: reference.sd ** 2, noise }] as const];
    }),
  );
  const errors = new Map(document.sharedErrors.map((one) => [one.key, one]));
  const data = document.measurements
    .filter((one) => models.has(one.measurand))
    .map((one) => ({
      residual: one.value! - models.get(one.measurand)!.mean,
      model: models.get(one.measurand)!,
      variance: one.sd! ** 2 + models.get(one.measurand)!.noise,
      loads: one.shared.map(({ error: key, coefficient }) => {
        const { sd, per } = errors.get(key)!;
        return { draw: per === "batch" ? `${key} ${one.batch}` : key, load: coefficient * sd };
      }),
    }));
  const n = data.length;
  const factor = new Float64Array(n * n);
  for (let i = 0; i < n; i += 1) {
    for (let j = 0; j <= i; j += 1) {
      let sum = data[i]!.model === data[j]!.model ? data[i]!.model.common : 0;
      for (const a of data[i]!.loads) {
        for (const b of data[j]!.loads) if (a.draw === b.draw) sum += a.load * b.load;
      }
      factor[i * n + j] = i === j ? sum + data[i]!.variance : sum;
    }
  }
  return logDensity(
    factor,
    Float64Array.from(data, ({ residual }) => residual),
  );
}

/** One Cholesky of an N x N matrix: that of a smooth process with noise, at N places. */
export function choleskyMs(n: number): number {
  const factor = new Float64Array(n * n);
  for (let i = 0; i < n; i += 1) {
    for (let j = 0; j <= i; j += 1) {
      factor[i * n + j] = 0.01 * Math.exp(-Math.abs(i - j) / (0.1 * n)) + (i === j ? 0.01 : 0);
    }
  }
  const start = performance.now();
  logDensity(factor, new Float64Array(n));
  return performance.now() - start;
}

function logDensity(factor: Float64Array, z: Float64Array): number {
  const n = z.length;
  let ln = (-n * Math.log(2 * Math.PI)) / 2;
  for (let i = 0; i < n; i += 1) {
    for (let j = 0; j <= i; j += 1) {
      let sum = factor[i * n + j]!;
      for (let k = 0; k < j; k += 1) sum -= factor[i * n + k]! * factor[j * n + k]!;
      factor[i * n + j] = i === j ? Math.sqrt(sum) : sum / factor[j * n + j]!;
    }
    let rest = z[i]!;
    for (let k = 0; k < i; k += 1) rest -= factor[i * n + k]! * z[k]!;
    z[i] = rest / factor[i * n + i]!;
    ln -= Math.log(factor[i * n + i]!) + z[i]! ** 2 / 2;
  }
  return ln;
}
