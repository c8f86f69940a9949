/** Points of a piece, at Chebyshev's places. */
const POINTS = 14;
/** Between them, in ln; far from the peak, where less counts, more is allowed. */
const CLOSE = 1e-9;
/** Below the largest by this much a piece is a straight line: nothing there counts. */
const NEGLIGIBLE = 90;
const MOST_HALVINGS = 12;

interface Piece {
  lower: number;
  upper: number;
  values: Float64Array | null;
  ends: [number, number];
}

/**
 * A costly ln f, looked at in pieces that double away from a centre, each a polynomial through 14
 * Chebyshev points; one that misses f between them is halved.
 *
 * @param scale of f about the centre
 * Accuracy: 1e-9 in ln where f is smooth, more loosely where it is below e^-20 of its largest.
 */
export function interpolatedLog(
  ln: (x: number) => number,
  { centre, scale }: { centre: number; scale: number },
): (x: number) => number {
  const known = new Map<number, number>();
  let top = -Infinity;
  const value = (x: number) => {
    const there = known.get(x);
    if (there !== undefined) return there;
    const found = ln(x);
    const made = Number.isNaN(found) || found === Infinity ? -Infinity : found;
    known.set(x, made);
    if (made > top) top = made;
    return made;
  };
  value(centre);
  const pieces = new Map<string, Piece>();
  const pieceOf = (lower: number, upper: number): Piece => {
    const key = `${lower} ${upper}`;
    const there = pieces.get(key);
    if (there !== undefined) return there;
    const made = pieceBetween(lower, upper, { value, top: () => top });
    pieces.set(key, made);
    return made;
  };
  return (x) => {
    let [lower, upper] = startOf(x, centre, scale);
    for (let halvings = 0; ; halvings += 1) {
      const piece = pieceOf(lower, upper);
      if (isClose(piece, { value, top }) || halvings === MOST_HALVINGS) return valueIn(piece, x);
      const middle = (lower + upper) / 2;
      if (x < middle) upper = middle;
      else lower = middle;
    }
  };
}

/** [centre + scale (2^k - 1), centre + scale (2^(k+1) - 1)], on the side of x. */
function startOf(x: number, centre: number, scale: number): [number, number] {
  const side = x < centre ? -1 : 1;
  const step = Math.floor(Math.log2(Math.abs(x - centre) / scale + 1));
  const near = centre + side * scale * (2 ** step - 1);
  const far = centre + side * scale * (2 ** (step + 1) - 1);
  return side > 0 ? [near, far] : [far, near];
}

function pieceBetween(
  lower: number,
  upper: number,
  { value, top }: { value: (x: number) => number; top: () => number },
): Piece {
  const ends: [number, number] = [value(lower), value(upper)];
  const middle = value((lower + upper) / 2);
  if (Math.max(...ends, middle) < top() - NEGLIGIBLE) return { lower, upper, values: null, ends };
  const values = Float64Array.from({ length: POINTS }, (_, k) => value(placeIn(lower, upper, k)));
  return { lower, upper, values: values.every(Number.isFinite) ? values : null, ends };
}

function placeIn(lower: number, upper: number, k: number): number {
  const t = Math.cos((Math.PI * (k + 0.5)) / POINTS);
  return (lower + upper) / 2 + ((upper - lower) / 2) * t;
}

function isClose(
  piece: Piece,
  { value, top }: { value: (x: number) => number; top: number },
): boolean {
  const { lower, upper, values, ends } = piece;
  if (values === null) return !ends.some((end) => end > top - NEGLIGIBLE);
  return [0.03, 0.47].every((share) => {
    const x = lower + share * (upper - lower);
    const here = value(x);
    const allowed = CLOSE * Math.exp(Math.min(Math.max(top - here - 15, 0), 20));
    return Math.abs(valueIn(piece, x) - here) <= allowed;
  });
}

/** The barycentric formula at Chebyshev's places of the first kind. */
function valueIn({ lower, upper, values, ends }: Piece, x: number): number {
  if (values === null) {
    if (ends.includes(-Infinity)) return -Infinity;
    const share = (x - lower) / (upper - lower);
    return ends[0] + share * (ends[1] - ends[0]);
  }
  let [above, below] = [0, 0];
  for (let k = 0; k < POINTS; k += 1) {
    const distance = x - placeIn(lower, upper, k);
    if (distance === 0) return values[k]!;
    const weight = ((k % 2 === 0 ? 1 : -1) * Math.sin((Math.PI * (k + 0.5)) / POINTS)) / distance;
    above += weight * values[k]!;
    below += weight;
  }
  return above / below;
}
