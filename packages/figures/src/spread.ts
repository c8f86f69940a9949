/**
 * Tops of blocks in a fixed order, without overlap within [0, length], as near to where they are
 * wanted as least squares allows (pool adjacent violators on the positions less what lies before).
 *
 * @param blocks sizes add up to at most `length`
 */
export function spread(blocks: { wanted: number; size: number }[], length: number): number[] {
  let before = 0;
  const offsets = blocks.map(({ size }) => (before += size) - size);
  const pools: { sum: number; count: number }[] = [];
  blocks.forEach(({ wanted }, index) => {
    pools.push({ sum: wanted - (offsets[index] ?? 0), count: 1 });
    for (let last = pools.at(-1), prior = pools.at(-2); last && prior;) {
      if (prior.sum / prior.count <= last.sum / last.count) break;
      pools.splice(-2, 2, { sum: prior.sum + last.sum, count: prior.count + last.count });
      [last, prior] = [pools.at(-1), pools.at(-2)];
    }
  });
  const free = length - before;
  const shifts = pools.flatMap(({ sum, count }) =>
    Array.from({ length: count }, () => Math.max(0, Math.min(sum / count, free))),
  );
  return shifts.map((shift, index) => shift + (offsets[index] ?? 0));
}
