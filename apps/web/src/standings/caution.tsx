import type { Standings } from "@weighhouse/campaign/standings";
import { formatLnEvidence } from "@weighhouse/figures/standing-numbers";
import { Num } from "@/look/number";

/** What the standings do not say, and what they were computed from. */
export function Caution({ standings }: { standings: Standings }) {
  return (
    <div className="mt-3 text-[13.5px] text-quiet">
      <p className="max-w-[90ch]">
        These compare the hypotheses on this table under their stated priors and theory errors. The
        posterior is not the probability that any of them is true.
      </p>
      <p className="mt-1 max-w-[90ch]">
        No model at all, charged the no-model range (reference) of every quantity, has ln evidence{" "}
        <Num
          text={formatLnEvidence(standings.noModel.lnEvidence)}
          exact={standings.noModel.lnEvidence}
          at="/noModel/lnEvidence"
        />
        . Counted are{" "}
        <Num
          text={String(standings.measurements.counted)}
          exact={standings.measurements.counted}
          at="/measurements/counted"
        />{" "}
        measurements,{" "}
        <Num
          text={String(standings.measurements.setAside)}
          exact={standings.measurements.setAside}
          at="/measurements/setAside"
        />{" "}
        set aside; by engine {standings.engine}.
      </p>
    </div>
  );
}
