import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { Standings, VerdictRow } from "@weighhouse/campaign/standings";
import { formatLog10B } from "@weighhouse/figures/standing-numbers";
import { verdictWords } from "@/look/verdict-words";

/** As much of a campaign's state as it takes to say what has moved since. */
export interface StandingsDigest {
  size: number;
  at: string;
  counted: number;
  setAside: number;
  hypotheses: { key: string; title: string; log10BayesFactor: number | null }[];
  verdicts: { hypothesis: string; measurand: string; verdict: VerdictRow["verdict"] }[];
  measurands: { key: string; title: string; measurements: number }[];
}

export function digestOf(
  standings: Standings,
  document: CampaignDocument,
  state: { size: number; at: string },
): StandingsDigest {
  const titles = new Map<string, string>(document.hypotheses.map((each) => [each.key, each.title]));
  const measurandTitles = new Map(document.measurands.map((each) => [each.key, titleOf(each)]));
  return {
    ...state,
    counted: standings.measurements.counted,
    setAside: standings.measurements.setAside,
    hypotheses: standings.hypotheses.map(({ key, log10BayesFactor }) => ({
      key,
      title: titles.get(key) ?? "None of these",
      log10BayesFactor,
    })),
    verdicts: standings.verdicts.map(({ hypothesis, measurand, verdict }) => ({
      hypothesis,
      measurand,
      verdict,
    })),
    measurands: standings.measurands.map(({ key, measurements }) => ({
      key,
      title: measurandTitles.get(key) ?? key,
      measurements,
    })),
  };
}

/**
 * What moved between two states, in sentences, the most telling first: who leads, new
 * measurements, verdicts that turned, hypotheses that came, and how far each one moved.
 */
export function whatMoved(before: StandingsDigest, after: StandingsDigest): string[] {
  return [
    ...leadLines(before, after),
    ...measurementLines(before, after),
    ...verdictLines(before, after),
    ...hypothesisLines(before, after),
  ];
}

function leadLines(before: StandingsDigest, after: StandingsDigest): string[] {
  const [was, is] = [before.hypotheses[0], after.hypotheses[0]];
  if (!was || !is || was.key === is.key) return [];
  return [`${is.title} now leads, before it was ${was.title}.`];
}

function measurementLines(before: StandingsDigest, after: StandingsDigest): string[] {
  const counts = new Map(before.measurands.map((each) => [each.key, each.measurements]));
  const lines = after.measurands.flatMap((each) => {
    const more = each.measurements - (counts.get(each.key) ?? 0);
    if (more === 0) return [];
    const count = `${Math.abs(more)} measurement${Math.abs(more) === 1 ? "" : "s"}`;
    return [more > 0 ? `${count} more of ${each.title}.` : `${count} fewer of ${each.title}.`];
  });
  const aside = after.setAside - before.setAside;
  return aside > 0 ? [...lines, `${aside} set aside.`] : lines;
}

function verdictLines(before: StandingsDigest, after: StandingsDigest): string[] {
  const name = (row: { hypothesis: string; measurand: string }) =>
    `${row.hypothesis} ${row.measurand}`;
  const earlier = new Map(before.verdicts.map((row) => [name(row), row.verdict]));
  const hypotheses = new Map(after.hypotheses.map((each) => [each.key, each.title]));
  const measurands = new Map(after.measurands.map((each) => [each.key, each.title]));
  return after.verdicts.flatMap((row) => {
    const was = earlier.get(name(row));
    if (was === undefined || was === row.verdict) return [];
    const [measurand, hypothesis] = [measurands.get(row.measurand), hypotheses.get(row.hypothesis)];
    return [
      `${measurand ?? row.measurand} turned from ${verdictWords[was]} to ${verdictWords[row.verdict]} for ${hypothesis ?? row.hypothesis}.`,
    ];
  });
}

function hypothesisLines(before: StandingsDigest, after: StandingsDigest): string[] {
  const earlier = new Map(before.hypotheses.map((each) => [each.key, each.log10BayesFactor]));
  return after.hypotheses.flatMap((each) => {
    if (!earlier.has(each.key)) return [`${each.title} was registered.`];
    const was = formatLog10B(earlier.get(each.key) ?? null);
    const is = formatLog10B(each.log10BayesFactor);
    return was === is ? [] : [`${each.title} went from ${was} to ${is} in log₁₀ B.`];
  });
}

function titleOf(measurand: { key: string; title: string | null }): string {
  return measurand.title ?? measurand.key;
}
