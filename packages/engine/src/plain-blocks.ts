import type { Roles, Workspace } from "./workspace";

/**
 * Whether a block has nothing but levels, normal or flat, and readings that went into the sums:
 * then it is scored from those, however many measurements there are.
 */
export function isPlain(
  { frame, sums, derived }: Workspace,
  block: readonly number[],
  roles: Roles,
): boolean {
  return block.every((m) => {
    const { roles: said, apart, period } = frame.measurands[m]!;
    const { kind } = said[roles[m]!]!;
    const { kept, patterns } = sums.measurands[m]!;
    return (
      (kind === "normal" || kind === "uniform") &&
      !apart &&
      period === 0 &&
      kept.length === 0 &&
      !derived.measurands.includes(m) &&
      patterns.every((pattern) => !sums.patterns[pattern]!.relative.includes(true))
    );
  });
}
