import type { Workbench } from "./workbench";

/** Sum of X_ik z_k over a row's positions, or over those that are wanted. */
export function rowSum(
  { layout, state }: Workbench,
  row: number,
  values: Float64Array,
  wanted: ReadonlySet<number> | null = null,
): number {
  const { start, position, source, problem } = layout;
  let sum = 0;
  for (let e = start[row]!; e < start[row + 1]!; e += 1) {
    const p = position[e]!;
    if (wanted !== null && !wanted.has(p)) continue;
    const s = source[e]!;
    sum += (s >= 0 ? problem.design.value[s]! : state.columns[-1 - s]![row]!) * values[p]!;
  }
  return sum;
}
