import { KRONROD_RULE } from "./gauss-kronrod";
import { polynomialThrough } from "./polynomial-through";

/** A stretch of the line with the density's logs at the 21 nodes of the Kronrod rule. */
export interface Panel {
  lower: number;
  upper: number;
  logs: Float64Array;
  /** The largest of the logs. */
  top: number;
  /** Integral and error bound, both over exp(top). */
  value: number;
  error: number;
}

const POLYNOMIAL = polynomialThrough(KRONROD_RULE.nodes);

/**
 * Error as QUADPACK's qk21 has it: |Kronrod - Gauss| is raised to the power 3/2 relative to the
 * integral of |f - mean|, since the Kronrod rule is that much better than the difference tells.
 * Source: Piessens et al., QUADPACK (1983), 2.2.
 */
export function panelOn(f: (x: number) => number, lower: number, upper: number): Panel {
  const { nodes, kronrod, gauss } = KRONROD_RULE;
  const half = (upper - lower) / 2;
  const centre = lower + half;
  const logs = new Float64Array(21);
  let top = -Infinity;
  for (let i = 0; i < 21; i += 1) {
    logs[i] = f(centre + half * nodes[i]!);
    if (logs[i]! > top) top = logs[i]!;
  }
  if (top === -Infinity) return { lower, upper, logs, top, value: 0, error: 0 };
  let byKronrod = 0;
  let byGauss = 0;
  for (let i = 0; i < 21; i += 1) {
    const value = Math.exp(logs[i]! - top);
    byKronrod += kronrod[i]! * value;
    byGauss += gauss[i]! * value;
  }
  let variation = 0;
  for (let i = 0; i < 21; i += 1) {
    variation += kronrod[i]! * Math.abs(Math.exp(logs[i]! - top) - byKronrod / 2);
  }
  const difference = Math.abs(byKronrod - byGauss);
  const error =
    variation === 0 ? 0 : variation * Math.min(1, ((200 * difference) / variation) ** 1.5);
  return { lower, upper, logs, top, value: half * byKronrod, error: half * error };
}

/** The share of a panel's mass that lies below x, by the polynomial through its 21 values. */
export function shareBelow({ lower, upper, logs, top }: Panel, x: number): number {
  const t = (2 * (x - lower)) / (upper - lower) - 1;
  if (!(t > -1)) return 0;
  if (t >= 1) return 1;
  const values = logs.map((log) => Math.exp(log - top));
  let all = 0;
  for (let i = 0; i < 21; i += 1) all += KRONROD_RULE.kronrod[i]! * values[i]!;
  let below = 0;
  const half = (t + 1) / 2;
  for (let i = 0; i < 21; i += 1) {
    const at = -1 + half * (1 + KRONROD_RULE.nodes[i]!);
    below += KRONROD_RULE.kronrod[i]! * half * POLYNOMIAL(values, at);
  }
  return Math.min(Math.max(below / all, 0), 1);
}
