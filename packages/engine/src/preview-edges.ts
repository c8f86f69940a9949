import type { Outcome } from "./supposed-reading";

/** Where verdicts turn, in scoring space. */
export interface Edges {
  /** Null where even the middle doesn't pass; an end is null where all beyond pass too. */
  passes: { lower: number | null; upper: number | null } | null;
  /** Nearest values to the middle that fail; null where none does. */
  failsBelow: number | null;
  failsAbove: number | null;
}

/**
 * Looks for the edges on both sides of the middle, within reach; verdicts only get worse outwards.
 *
 * @param whole only whole numbers of at least 0 are looked at
 */
export function edgesOf(
  measured: (y: number) => Outcome,
  { middle, reach, whole }: { middle: number; reach: number; whole: boolean },
): Edges {
  const low = whole ? 0 : middle - reach;
  const high = whole ? middle + Math.ceil(reach) : middle + reach;
  const passing = (y: number) => measured(y).word() === "pass";
  const failing = (y: number) => measured(y).word() === "fail";
  const edge = (holds: (y: number) => boolean, inside: number, outside: number) =>
    lastHolding(holds, { inside, outside, whole });
  const failsAt = (end: number) => {
    if (!failing(end)) return null;
    return failing(middle) ? middle : edge(failing, end, middle);
  };
  return {
    passes: passing(middle)
      ? {
          lower: passing(low) ? null : edge(passing, middle, low),
          upper: passing(high) ? null : edge(passing, middle, high),
        }
      : null,
    failsBelow: failsAt(low),
    failsAbove: failsAt(high),
  };
}

/** The last value on the way from `inside`, where the test holds, to `outside`, where it doesn't. */
function lastHolding(
  holds: (y: number) => boolean,
  { inside, outside, whole }: { inside: number; outside: number; whole: boolean },
): number {
  let [a, b] = [inside, outside];
  const close = 1e-12 * Math.abs(outside - inside);
  for (let step = 0; step < 100 && Math.abs(b - a) > close; step += 1) {
    const halved = (a + b) / 2;
    const middle = whole ? Math.trunc(halved) : halved;
    if (middle === a || middle === b) break;
    if (holds(middle)) a = middle;
    else b = middle;
  }
  return a;
}
