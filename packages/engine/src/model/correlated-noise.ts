import type { CorrelationGroup } from "../block/problem";
import type { Workspace } from "../workspace";
import type { OpenRows } from "./row-kinds";
import type { Row } from "./block-parts";
import { Union } from "./union";

/** The groups of measurements that the document's `correlations` tie together, by id. */
export function correlationGroups(
  correlations: readonly { a: string; b: string }[],
): Map<string, number> {
  const union = new Union();
  const nodes = new Map<string, number>();
  const nodeOf = (id: string) => {
    const node = nodes.get(id) ?? union.add();
    nodes.set(id, node);
    return node;
  };
  for (const { a, b } of correlations) union.join(nodeOf(a), nodeOf(b));
  return new Map([...nodes].map(([id, node]) => [id, union.rootOf(node)]));
}

/**
 * Covariances of the noises in a block: of measurements that the document correlates, coefficient x
 * sd_a x sd_b of what is each one's own (sqrt(plus minus) of an asymmetric one), and of derived
 * values. The diagonal has all variance.
 */
export function correlationGroupsOf(
  workspace: Workspace,
  rows: readonly Row[],
  open: OpenRows,
): CorrelationGroup[] {
  return [...measuredGroups(workspace, rows, open), ...derivedGroup(workspace, rows, open)];
}

function measuredGroups(
  { frame, correlationGroups: groups }: Workspace,
  rows: readonly Row[],
  open: OpenRows,
): CorrelationGroup[] {
  const members = new Map<number, number[]>();
  const places = new Map<string, number>();
  rows.forEach(({ id }, i) => {
    if (id === null) return;
    places.set(id, i);
    const group = groups.get(id)!;
    const there = members.get(group);
    if (there === undefined) members.set(group, [i]);
    else there.push(i);
  });
  if (places.size === 0) return [];
  const made = [...members.values()].map((places) => groupOf(places, rows, open));
  const within = new Map<number, { group: CorrelationGroup; at: number }>();
  for (const group of made) group.rows.forEach((row, at) => within.set(row, { group, at }));
  for (const { a, b, coefficient } of frame.document.correlations) {
    const [first, second] = [places.get(a), places.get(b)];
    if (first === undefined || second === undefined) continue;
    const one = within.get(first)!;
    const other = within.get(second)!;
    const size = one.group.rows.length;
    const value =
      coefficient * ownSd(rows[first]!, open, first) * ownSd(rows[second]!, open, second);
    one.group.covariance[one.at * size + other.at] = value;
    one.group.covariance[other.at * size + one.at] = value;
  }
  return made.filter(({ rows: own }) => own.length > 1);
}

function groupOf(
  places: readonly number[],
  rows: readonly Row[],
  open: OpenRows,
): CorrelationGroup {
  const size = places.length;
  const covariance = new Float64Array(size * size);
  places.forEach((row, at) => {
    const asymmetric =
      rows[row]!.told?.form === "asymmetric" ? ownSd(rows[row]!, open, row) ** 2 : 0;
    covariance[at * size + at] = open.variance[row]! + asymmetric;
  });
  return { rows: Int32Array.from(places), covariance };
}

function ownSd({ told, variance, extra }: Row, open: OpenRows, i: number): number {
  return told?.form === "asymmetric"
    ? Math.sqrt(open.asymmetric.plus[i]! * open.asymmetric.minus[i]!)
    : Math.sqrt(variance - extra);
}

function derivedGroup(
  { derived }: Workspace,
  rows: readonly Row[],
  open: OpenRows,
): CorrelationGroup[] {
  const places: number[] = [];
  const ofVector: number[] = [];
  rows.forEach(({ measurand }, i) => {
    const place = derived.measurands.indexOf(measurand);
    if (place < 0) return;
    places.push(i);
    ofVector.push(place);
  });
  const size = places.length;
  if (size < 2) return [];
  const covariance = new Float64Array(size * size);
  ofVector.forEach((p, i) => {
    ofVector.forEach((q, j) => {
      const shared = derived.covariance[p * derived.measurands.length + q]!;
      covariance[i * size + j] = i === j ? open.variance[places[i]!]! : shared;
    });
  });
  return [{ rows: Int32Array.from(places), covariance }];
}
