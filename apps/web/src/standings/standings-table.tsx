import type { VerdictWord } from "@weighhouse/campaign/standings";
import {
  formatChiSquareAlone,
  formatLnEvidence,
  formatLog10B,
  formatP,
  formatPosterior,
} from "@weighhouse/figures/standing-numbers";
import { KeptLink } from "@/look/kept-link";
import { HypothesisMark } from "@/look/hypothesis-mark";
import { Num, tailOf } from "@/look/number";
import { Table } from "@/look/table";
import type { RankedHypothesis } from "./table-rows";

/** The standings as a table, in order of rank. */
export function StandingsTable(props: { hypotheses: RankedHypothesis[]; base: string }) {
  const { hypotheses } = props;
  const tails = columnTails(hypotheses);
  return (
    <Table
      caption="Standings in order of rank"
      stackBelow="middle"
      paired
      head={
        <tr>
          <th scope="col">Hypothesis</th>
          <th scope="col" className="number">
            log₁₀ B <br />
            <span className="gloss">against the leader</span>
          </th>
          <th scope="col" className="number">
            Posterior <br />
            <span className="gloss">see the caution below</span>
          </th>
          <th scope="col" className="number">
            χ² / dof
          </th>
          <th scope="col" className="number">
            p
          </th>
          <th scope="col" className="number">
            ln evidence
          </th>
          <th scope="col">Verdicts</th>
          <th scope="col" className="number">
            Compared
          </th>
        </tr>
      }
    >
      {hypotheses.map((hypothesis) => (
        <Row key={hypothesis.key} hypothesis={hypothesis} base={props.base} tails={tails} />
      ))}
    </Table>
  );
}

function Row({
  hypothesis,
  base,
  tails,
}: {
  hypothesis: RankedHypothesis;
  base: string;
  tails: ReturnType<typeof columnTails>;
}) {
  const { standing, at } = hypothesis;
  return (
    <tr data-hypothesis={hypothesis.key}>
      <th scope="row">
        <span className="mr-2 inline-block min-w-[2ch] text-right text-quiet">
          <Num text={String(standing.rank)} exact={standing.rank} at={`${at}/rank`} />
        </span>
        <HypothesisMark index={hypothesis.index} />
        {hypothesis.registered ? (
          <KeptLink href={`${base}/hypotheses/${hypothesis.key}`} className="link font-semibold">
            {hypothesis.title}
          </KeptLink>
        ) : (
          <span title="Silent on everything: charged the no-model range of every quantity">
            {hypothesis.title}
          </span>
        )}
        {standing.failedDecisive.length > 0 ? (
          <span className="block pl-[3.4em] text-[13px] text-rust max-[900px]:pl-0">
            failed a decisive prediction
          </span>
        ) : null}
      </th>
      <td className="number" data-label="log₁₀ B">
        <Num
          text={formatLog10B(standing.log10BayesFactor)}
          exact={standing.log10BayesFactor}
          at={`${at}/log10BayesFactor`}
          tail={tails.bayes}
        />
      </td>
      <td className="number" data-label="Posterior">
        <Num
          text={formatPosterior(standing.posterior)}
          exact={standing.posterior}
          at={`${at}/posterior`}
          tail={tails.posterior}
        />
      </td>
      <td className="number" data-label="χ² / dof">
        <span>
          <Num
            text={chiText(standing.chiSquare)}
            exact={standing.chiSquare}
            at={`${at}/chiSquare`}
            tail={tails.chi}
            absent="nothing compared"
          />{" "}
          <span className="text-quiet">/</span>{" "}
          <span className="inline-block text-left" style={{ minWidth: `${tails.dof}ch` }}>
            <Num
              text={String(standing.degreesOfFreedom)}
              exact={standing.degreesOfFreedom}
              at={`${at}/degreesOfFreedom`}
            />
          </span>
        </span>
      </td>
      <td className="number" data-label="p">
        <Num
          text={standing.pValue === null ? null : formatP(standing.pValue)}
          exact={standing.pValue}
          at={`${at}/pValue`}
          tail={tails.p}
          absent="no degrees of freedom"
        />
      </td>
      <td className="number" data-label="ln evidence" data-whole>
        <Num
          text={formatLnEvidence(standing.lnEvidence, standing.lnEvidenceError)}
          exact={standing.lnEvidence}
          at={`${at}/lnEvidence`}
          tail={tails.evidence}
        />
      </td>
      <td data-label="Verdicts" data-whole>
        <Counts standing={standing} at={at} />
      </td>
      <td className="number" data-label="Compared" data-whole>
        <span>
          <Num text={String(standing.compared)} exact={standing.compared} at={`${at}/compared`} />
          <span className="text-[13px] text-quiet">
            , silent on{" "}
            <span className="inline-block min-w-[2ch]">
              <Num text={String(standing.silent)} exact={standing.silent} at={`${at}/silent`} />
            </span>
          </span>
        </span>
      </td>
    </tr>
  );
}

const shownAlways: [VerdictWord, string][] = [
  ["pass", "pass"],
  ["fail", "fail"],
  ["undecided", "undecided"],
];
const shownIfAny: [VerdictWord, string][] = [
  ["awaiting", "awaiting"],
  ["notMeasured", "not measured"],
  ["withheld", "withheld"],
  ["void", "void"],
];

function Counts({ standing, at }: { standing: RankedHypothesis["standing"]; at: string }) {
  const words = [
    ...shownAlways,
    ...shownIfAny.filter(([verdict]) => standing.verdicts[verdict] > 0),
  ];
  return (
    <span className="inline-flex flex-wrap gap-x-2.5 min-[1101px]:flex-nowrap">
      {words.map(([verdict, word]) => (
        <span key={verdict} className="whitespace-nowrap">
          <Num
            text={String(standing.verdicts[verdict])}
            exact={standing.verdicts[verdict]}
            at={`${at}/verdicts/${verdict}`}
          />{" "}
          <span className="text-[13px] text-quiet">{word}</span>
        </span>
      ))}
    </span>
  );
}

function columnTails(hypotheses: RankedHypothesis[]) {
  const standings = hypotheses.map((hypothesis) => hypothesis.standing);
  return {
    bayes: tailOf(standings.map((each) => formatLog10B(each.log10BayesFactor))),
    posterior: tailOf(standings.map((each) => formatPosterior(each.posterior))),
    dof: Math.max(...standings.map((each) => String(each.degreesOfFreedom).length)),
    chi: tailOf(standings.map((each) => chiText(each.chiSquare))),
    p: tailOf(standings.map((each) => (each.pValue === null ? null : formatP(each.pValue)))),
    evidence: tailOf(
      standings.map((each) => formatLnEvidence(each.lnEvidence, each.lnEvidenceError)),
    ),
  };
}

function chiText(chiSquare: number | null): string | null {
  return chiSquare === null ? null : formatChiSquareAlone(chiSquare);
}
