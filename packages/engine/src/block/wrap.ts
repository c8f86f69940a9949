/** A difference on a circle, brought into (-period / 2, period / 2]; unchanged for period 0. */
export function wrapDifference(difference: number, period: number): number {
  if (period === 0) return difference;
  const turned = difference - period * Math.round(difference / period);
  return turned <= -period / 2 ? turned + period : turned;
}
