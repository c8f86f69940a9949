/**
 * Evaluates the polynomial through values at fixed nodes, by the barycentric formula.
 *
 * @param nodes distinct, in [-1, 1]
 * @returns a function of the values at the nodes and of a place
 * Source: Berrut & Trefethen, SIAM Review 46 (2004) 501.
 */
export function polynomialThrough(
  nodes: Float64Array,
): (values: Float64Array, at: number) => number {
  const weights = nodes.map((node, i) => {
    let product = 1;
    // Doubled differences keep the product of order one: the interval's capacity is 1/2.
    for (let k = 0; k < nodes.length; k += 1) if (k !== i) product *= 2 * (node - nodes[k]!);
    return 1 / product;
  });
  return (values, at) => {
    let above = 0;
    let below = 0;
    for (let i = 0; i < nodes.length; i += 1) {
      const distance = at - nodes[i]!;
      if (distance === 0) return values[i]!;
      const share = weights[i]! / distance;
      above += share * values[i]!;
      below += share;
    }
    return above / below;
  };
}
