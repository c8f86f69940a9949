import type { Standings, VerdictWord } from "@weighhouse/campaign/standings";

/** What differs between two standings: verdicts that turn, ranks that move. */
export type StandingsChanges = {
  before: Standings;
  after: Standings;
  verdicts: {
    hypothesis: string;
    measurand: string;
    before: VerdictWord | null;
    after: VerdictWord | null;
  }[];
  ranks: { hypothesis: string; before: number | null; after: number | null }[];
};

export function standingsChanges(before: Standings, after: Standings): StandingsChanges {
  return {
    before,
    after,
    verdicts: differences(before.verdicts, after.verdicts, {
      keyOf: ({ hypothesis, measurand }) => ({ hypothesis, measurand }),
      valueOf: ({ verdict }) => verdict,
    }),
    ranks: differences(before.hypotheses, after.hypotheses, {
      keyOf: ({ key }) => ({ hypothesis: key }),
      valueOf: ({ rank }) => rank,
    }),
  };
}

/** Rows of `after`, in its order, whose value is another than before; then those that are gone. */
function differences<Row, Key extends object, Value>(
  before: Row[],
  after: Row[],
  row: { keyOf: (row: Row) => Key; valueOf: (row: Row) => Value },
): (Key & { before: Value | null; after: Value | null })[] {
  const name = (one: Row) => JSON.stringify(row.keyOf(one));
  const old = new Map(before.map((one) => [name(one), one]));
  const now = new Map(after.map((one) => [name(one), one]));
  const rows = [...now.values(), ...before.filter((one) => !now.has(name(one)))];
  const value = (one: Row | undefined) => (one === undefined ? null : row.valueOf(one));
  return rows
    .map((one) => ({
      ...row.keyOf(one),
      before: value(old.get(name(one))),
      after: value(now.get(name(one))),
    }))
    .filter((one) => one.before !== one.after);
}
