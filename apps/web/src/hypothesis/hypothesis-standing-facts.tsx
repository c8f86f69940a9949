import type { Hypothesis } from "@weighhouse/campaign/document";
import type { HypothesisStanding } from "@weighhouse/campaign/standings";
import { formatNumber } from "@weighhouse/figures/numbers";
import {
  formatChiSquareAlone,
  formatLnEvidence,
  formatLog10B,
  formatP,
  formatPosterior,
} from "@weighhouse/figures/standing-numbers";
import type { ReactNode } from "react";
import { Num } from "@/look/number";
import { Time } from "@/look/time";

/** A hypothesis's standing, term by term, and how it was registered. */
export function HypothesisStandingFacts(props: {
  hypothesis: Hypothesis;
  standing: { row: HypothesisStanding; at: string } | null;
  /** A measurand's title by its key. */
  titleOf: (measurand: string) => string;
}) {
  const { hypothesis, standing } = props;
  return (
    <>
      <dl className="facts">
        {standing ? (
          <StandingFacts row={standing.row} at={standing.at} titleOf={props.titleOf} />
        ) : null}
        {hypothesis.registeredAt ? (
          <Fact term="Registered">
            <Time at={hypothesis.registeredAt} />
          </Fact>
        ) : null}
        {hypothesis.weight === 1 && hypothesis.group === null ? null : (
          <Fact term="Weight">
            {formatNumber(hypothesis.weight)}
            {hypothesis.group ? `, shared within the group “${hypothesis.group}”` : ""}
          </Fact>
        )}
      </dl>
      <p className="mt-3 text-[13.5px] text-quiet">
        The posterior compares it with the others on this table under the stated priors and theory
        errors; it is not the probability that it is true.
      </p>
    </>
  );
}

function StandingFacts(props: {
  row: HypothesisStanding;
  at: string;
  titleOf: (measurand: string) => string;
}) {
  const { row, at, titleOf } = props;
  return (
    <>
      <Fact term="Rank">
        <Num text={String(row.rank)} exact={row.rank} at={`${at}/rank`} />
      </Fact>
      <Fact term="log₁₀ B against the leader">
        <Num
          text={formatLog10B(row.log10BayesFactor)}
          exact={row.log10BayesFactor}
          at={`${at}/log10BayesFactor`}
        />
      </Fact>
      <Fact term="Posterior">
        <Num text={formatPosterior(row.posterior)} exact={row.posterior} at={`${at}/posterior`} />
      </Fact>
      <Fact term="ln evidence">
        <Num
          text={formatLnEvidence(row.lnEvidence, row.lnEvidenceError)}
          exact={row.lnEvidence}
          at={`${at}/lnEvidence`}
        />
      </Fact>
      <Fact term="χ² / dof, p">
        <Num
          text={row.chiSquare === null ? null : formatChiSquareAlone(row.chiSquare)}
          exact={row.chiSquare}
          at={`${at}/chiSquare`}
          absent="nothing compared"
        />{" "}
        /{" "}
        <Num
          text={String(row.degreesOfFreedom)}
          exact={row.degreesOfFreedom}
          at={`${at}/degreesOfFreedom`}
        />
        , p ={" "}
        <Num
          text={row.pValue === null ? null : formatP(row.pValue)}
          exact={row.pValue}
          at={`${at}/pValue`}
          absent="no degrees of freedom"
        />
      </Fact>
      <Fact term="Measurements compared">
        <Num text={String(row.compared)} exact={row.compared} at={`${at}/compared`} />, silent on{" "}
        <Num text={String(row.silent)} exact={row.silent} at={`${at}/silent`} />
      </Fact>
      {row.failedDecisive.length > 0 ? (
        <Fact term="Failed decisive">
          <span className="text-rust">{row.failedDecisive.map(titleOf).join(", ")}</span>
        </Fact>
      ) : null}
    </>
  );
}

function Fact({ term, children }: { term: string; children: ReactNode }) {
  return (
    <>
      <dt>{term}</dt>
      <dd>{children}</dd>
    </>
  );
}
