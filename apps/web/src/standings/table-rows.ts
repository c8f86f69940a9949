import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { HypothesisStanding, Standings, VerdictRow } from "@weighhouse/campaign/standings";

/** A hypothesis as the pages show it: its standing, its name, and where both are to be found. */
export interface RankedHypothesis {
  key: string;
  title: string;
  standing: HypothesisStanding;
  /** JSON Pointer of the standing. */
  at: string;
  /** Its place in the document: what gives it its colour and shape, whatever its rank. */
  index: number;
  /** False for "none of these", which nobody registered: it has no page of its own. */
  registered: boolean;
}

/** The hypotheses in order of rank. `noneOfThese`, where it is weighted, has no place of its own. */
export function rankedHypotheses(
  standings: Standings,
  document: CampaignDocument,
): RankedHypothesis[] {
  const places = new Map(document.hypotheses.map((hypothesis, index) => [hypothesis.key, index]));
  return standings.hypotheses.map((standing, position) => {
    const index = places.get(standing.key);
    return {
      key: standing.key,
      title: index === undefined ? "None of these" : (document.hypotheses[index]?.title ?? ""),
      standing,
      at: `/hypotheses/${position}`,
      index: index ?? document.hypotheses.length,
      registered: index !== undefined,
    };
  });
}

export interface GridRow {
  measurand: CampaignDocument["measurands"][number];
  observable: CampaignDocument["observables"][number] | null;
  /** Index in the standings' `measurands`; null where the standings do not list it. */
  place: number | null;
  combined: Standings["measurands"][number]["combined"];
  measurements: number;
  /** By hypothesis, in the order asked for; null: silent. */
  cells: ({ row: VerdictRow; at: string } | null)[];
}

/** The verdict grid: measurands in order of their windows, a cell for each hypothesis. */
export function verdictGrid(
  standings: Standings,
  document: CampaignDocument,
  hypotheses: readonly { key: string }[],
): GridRow[] {
  const verdicts = new Map(
    standings.verdicts.map((row, index) => [
      cellKey(row.hypothesis, row.measurand),
      { row, at: `/verdicts/${index}` },
    ]),
  );
  const places = new Map(standings.measurands.map((measurand, index) => [measurand.key, index]));
  const observables = new Map(document.observables.map((each) => [each.key, each]));
  return inWindowOrder(document.measurands).map((measurand) => {
    const place = places.get(measurand.key) ?? null;
    const standing = place === null ? undefined : standings.measurands[place];
    return {
      measurand,
      observable: observables.get(measurand.observable) ?? null,
      place,
      combined: standing?.combined ?? null,
      measurements: standing?.measurements ?? 0,
      cells: hypotheses.map(
        (hypothesis) => verdicts.get(cellKey(hypothesis.key, measurand.key)) ?? null,
      ),
    };
  });
}

/** Earliest window first; those without a beginning come first, ties keep the document's order. */
export function inWindowOrder<M extends { window: { from: string | null; to: string | null } }>(
  measurands: readonly M[],
): M[] {
  const from = (measurand: M) =>
    measurand.window.from === null ? -Infinity : Date.parse(measurand.window.from);
  const to = (measurand: M) =>
    measurand.window.to === null ? Infinity : Date.parse(measurand.window.to);
  return measurands.toSorted((a, b) => compare(from(a), from(b)) || compare(to(a), to(b)));
}

// Not a difference: that of two infinities is not a number.
function compare(a: number, b: number): number {
  if (a === b) return 0;
  return a < b ? -1 : 1;
}

function cellKey(hypothesis: string, measurand: string): string {
  return `${hypothesis} ${measurand}`;
}
