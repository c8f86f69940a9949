import { chartPlace, mapFromChart, type Chart } from "./cube-chart";
import { legendrePolynomials, legendreRule } from "./legendre-rule";

/** A density, and the share of it that a chart has to do with; both as logs at a place of the cube. */
export interface Integrand {
  density: (u: Float64Array) => number;
  share: (u: Float64Array) => number;
}

/** The integrand in a chart on a tensor grid of Gauss-Legendre nodes. */
export interface ChartGrid {
  chart: Chart;
  /** Nodes an axis. */
  n: number;
  /** n^d logs of integrand times Jacobian, the last axis running fastest. */
  logs: Float64Array;
  /** n^d logs of the density itself. */
  densities: Float64Array;
  /** n^d x d places in the cube. */
  points: Float64Array;
  top: number;
  /** Integral over exp(top). */
  value: number;
}

export function gridOn({ density, share }: Integrand, chart: Chart, n: number): ChartGrid {
  const dimension = chart.lower.length;
  const { nodes } = legendreRule(n);
  const size = n ** dimension;
  const logs = new Float64Array(size);
  const densities = new Float64Array(size);
  const points = new Float64Array(size * dimension);
  const v = new Float64Array(dimension);
  const u = new Float64Array(dimension);
  let top = -Infinity;
  for (let k = 0; k < size; k += 1) {
    for (let i = dimension - 1, rest = k; i >= 0; i -= 1) {
      v[i] = (1 + nodes[rest % n]!) / 2;
      rest = Math.floor(rest / n);
    }
    const lnJacobian = mapFromChart(chart, v, u);
    points.set(u, k * dimension);
    const ln = density(u);
    densities[k] = ln;
    logs[k] = ln === -Infinity ? ln : ln + share(u) + lnJacobian;
    if (logs[k]! > top) top = logs[k]!;
  }
  const grid = { chart, n, logs, densities, points, top, value: 0 };
  if (top > -Infinity) {
    const weights = gridWeights(grid);
    for (let k = 0; k < size; k += 1) grid.value += weights[k]! * Math.exp(logs[k]! - top);
  }
  return grid;
}

/** Weights of the tensor rule over v in [0, 1]^d. */
export function gridWeights({ chart, n }: ChartGrid): Float64Array {
  const dimension = chart.lower.length;
  const { weights } = legendreRule(n);
  return Float64Array.from({ length: n ** dimension }, (_, k) => {
    let product = 1;
    for (let i = 0, rest = k; i < dimension; i += 1) {
      product *= weights[rest % n]! / 2;
      rest = Math.floor(rest / n);
    }
    return product;
  });
}

/**
 * The grid's integral over the part of the box where coordinate `axis` is at most x, over
 * exp(top): along each line of that axis the polynomial through the nodes, integrated over the
 * later axes, is itself integrated up to the place of x.
 *
 * @returns a function of x
 */
export function gridBelow(grid: ChartGrid, axis: number): (x: number) => number {
  const { chart, n, logs, points, top } = grid;
  const dimension = chart.lower.length;
  const { nodes } = legendreRule(n);
  const inner = n ** (dimension - 1 - axis);
  const lines = n ** axis;
  const all = gridWeights(grid);
  const polynomials = Array.from(nodes, (node) => legendrePolynomials(node, n));
  // Legendre coefficients of each line's integrand, with the weights of the axes before it.
  const coefficients = new Float64Array(lines * n);
  for (let line = 0; line < lines; line += 1) {
    for (let m = 0; m < n; m += 1) {
      let mass = 0;
      for (let k = 0; k < inner; k += 1) {
        const at = (line * n + m) * inner + k;
        mass += all[at]! * Math.exp(logs[at]! - top);
      }
      for (let degree = 0; degree < n; degree += 1) {
        coefficients[line * n + degree]! += mass * polynomials[m]![degree]!;
      }
    }
  }
  return (x) => {
    if (x <= chart.lower[axis]!) return 0;
    let below = 0;
    for (let line = 0; line < lines; line += 1) {
      const at = line * n * inner * dimension;
      const v = chartPlace(chart, points.subarray(at, at + dimension), { axis, x });
      const p = legendrePolynomials(2 * v - 1, n + 1);
      // Integral of P_k from -1 on: (P_(k+1) - P_(k-1)) / (2k + 1); the line's weights sum to 1.
      below += coefficients[line * n]! * v;
      for (let k = 1; k < n; k += 1) {
        below += (coefficients[line * n + k]! * (p[k + 1]! - p[k - 1]!)) / 2;
      }
    }
    return below;
  };
}
