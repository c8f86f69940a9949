/** Median time of several runs. Ratios are what to look at: they hang less on the machine. */
export function medianMs(repeats: number, run: () => unknown): number {
  const times = Array.from({ length: repeats }, () => {
    const start = performance.now();
    run();
    return performance.now() - start;
  });
  return times.sort((a, b) => a - b)[Math.floor(repeats / 2)]!;
}

/** A line of numbers, each right-aligned in its column. */
export function line(columns: readonly (readonly [number | string, number])[]): string {
  return columns.map(([value, width]) => String(value).padStart(width)).join(" ");
}
