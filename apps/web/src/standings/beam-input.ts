import type { Standings } from "@weighhouse/campaign/standings";
import type { BeamInput } from "@weighhouse/figures/beam";
import { beamInput } from "@weighhouse/figures/beam-input";
import { formatLnEvidence, formatLog10B } from "@weighhouse/figures/standing-numbers";
import type { RankedHypothesis } from "./table-rows";

/** Where a mark's number comes from: its pointer, the unrounded number and its text on the beam. */
export interface MarkedNumber {
  at: string;
  exact: number | null;
  text: string;
}

/** What the beam draws, with what each mark needs to name its place in the standings document. */
export interface BeamView {
  input: BeamInput;
  /** By hypothesis key; `index` gives the ink. */
  marks: Record<string, MarkedNumber & { index: number }>;
  noModel: MarkedNumber;
}

export function beamView(standings: Standings, hypotheses: readonly RankedHypothesis[]): BeamView {
  const titles = new Map(hypotheses.map((each) => [each.key, each.title]));
  return {
    input: beamInput(standings, (key) => titles.get(key) ?? key),
    marks: Object.fromEntries(
      hypotheses.map(({ key, at, index, standing }) => [
        key,
        {
          at: `${at}/log10BayesFactor`,
          exact: standing.log10BayesFactor,
          text: formatLog10B(standing.log10BayesFactor),
          index,
        },
      ]),
    ),
    noModel: {
      at: "/noModel/lnEvidence",
      exact: standings.noModel.lnEvidence,
      text: formatLnEvidence(standings.noModel.lnEvidence),
    },
  };
}

/** The beam in a sentence, for those who hear it. */
export function beamInWords(view: BeamView): string {
  const { hypotheses, noneDescribes } = view.input;
  if (hypotheses.length === 0) return "Nothing hangs on the beam yet.";
  const [first, ...others] = hypotheses;
  const rest = others.map((each) => `${each.title} ${view.marks[each.key]?.text ?? ""}`);
  const none = noneDescribes ? " No hypothesis describes the data." : "";
  return `${first?.title ?? ""} leads${rest.length > 0 ? "; " : ""}${rest.join("; ")}.${none}`;
}
