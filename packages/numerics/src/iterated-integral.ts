import { conditionalPeak, type Peak } from "./cube-chart";
import type { CubeIntegral, CubeMode } from "./cube-integral";
import { lineIntegral } from "./line-integral";

/** Lines and squares further than this from a peak, in its standard deviations, don't look for it. */
const FAR = 12;
const OUTER_SCAN = 24;
const INNER_SCAN = 40;
/** Inner integrals are this much more exact, so that the outer rule sees no noise. */
const FINER = 0.1;
/** Once the work has run out, what is begun is finished this coarsely; the error says so. */
const COARSE = 1e-5;

interface IteratedOptions {
  peaks: readonly Peak[];
  breaks: readonly (readonly number[])[];
  relative: number;
  mayGoOn: () => boolean;
  /** The integral over a square, for slices of the cube. */
  square: (f: (u: Float64Array) => number, options: SquareOptions) => CubeIntegral;
}

interface SquareOptions {
  modes: readonly CubeMode[];
  breaks: readonly (readonly number[])[];
  relative: number;
  mayGoOn: () => boolean;
}

/**
 * ln of the integral of exp(f) over the unit square or cube as an integral along the first axis of
 * integrals over the others, each adaptive by itself: slower than a chart, but it follows ridges
 * that bend, shells, steps and kinks.
 *
 * @param f log density
 * @param peaks looked for along each line too, at their places given the coordinates before
 */
export function iteratedIntegral(
  f: (u: Float64Array) => number,
  dimension: 2 | 3,
  options: IteratedOptions,
): CubeIntegral {
  const { peaks, breaks, relative, mayGoOn } = options;
  const inner = new Map<number, CubeIntegral>();
  let evaluations = 0;
  const slice = (x: number) => {
    const known = inner.get(x);
    if (known !== undefined) return known.ln;
    const found = sliceIntegral(f, x, { ...options, dimension });
    evaluations += found.evaluations;
    inner.set(x, found);
    return found.ln;
  };
  const outer = lineIntegral(slice, {
    modes: peaks.map((peak) => modeOf(peak.centre, peak.factor.subarray(0, 1), 1)),
    breaks: breaks[0] ?? [],
    relative,
    scan: OUTER_SCAN,
    mayGoOn,
  });
  const slices = Array.from(outer.nodes.points, (x, i) => ({
    x,
    share: Math.exp(outer.nodes.lnWeights[i]!),
    integral: inner.get(x)!,
  }));
  const sumOf = (what: (integral: CubeIntegral) => number) =>
    slices.reduce((sum, { share, integral }) => sum + share * what(integral), 0);
  return {
    ln: outer.ln,
    error: outer.error + sumOf(({ error }) => error),
    evaluations,
    information: outer.information + sumOf(({ information }) => information),
    nodes: joined(slices, dimension),
    cdf: (axis, x) => (axis === 0 ? outer.cdf!(0, x) : sumOf(({ cdf }) => cdf!(axis - 1, x))),
  };
}

function modeOf(centre: Float64Array, scale: Float64Array, dimension: number): CubeMode {
  return { centre: centre.subarray(0, dimension), scale };
}

function sliceIntegral(
  f: (u: Float64Array) => number,
  x: number,
  { peaks, breaks, relative, mayGoOn, square, dimension }: IteratedOptions & { dimension: 2 | 3 },
): CubeIntegral {
  const near = peaks.filter(({ centre, factor }) => Math.abs(x - centre[0]!) < FAR * factor[0]!);
  const given = near.map((peak) => conditionalPeak(peak, x));
  const modes = given.map(({ centre, factor }) => modeOf(centre, factor, dimension - 1));
  const inner = mayGoOn() ? relative * FINER : COARSE;
  const u = new Float64Array(dimension);
  u[0] = x;
  if (dimension === 3) {
    const onSquare = (rest: Float64Array) => {
      u[1] = rest[0]!;
      u[2] = rest[1]!;
      return f(u);
    };
    return square(onSquare, {
      modes,
      breaks: breaks.slice(1),
      relative: inner,
      mayGoOn,
    });
  }
  const line = (y: number) => {
    u[1] = y;
    return f(u);
  };
  return lineIntegral(line, {
    modes,
    breaks: breaks[1] ?? [],
    relative: inner,
    scan: INNER_SCAN,
  });
}

function joined(
  slices: readonly { x: number; share: number; integral: CubeIntegral }[],
  dimension: number,
): CubeIntegral["nodes"] {
  const count = slices.reduce((sum, { integral }) => sum + integral.nodes.lnWeights.length, 0);
  const points = new Float64Array(count * dimension);
  const lnWeights = new Float64Array(count);
  let at = 0;
  for (const { x, share, integral } of slices) {
    const { nodes } = integral;
    for (let k = 0; k < nodes.lnWeights.length; k += 1) {
      points[at * dimension] = x;
      const rest = nodes.points.subarray(k * (dimension - 1), (k + 1) * (dimension - 1));
      points.set(rest, at * dimension + 1);
      lnWeights[at] = Math.log(share) + nodes.lnWeights[k]!;
      at += 1;
    }
  }
  return { points, lnWeights };
}
