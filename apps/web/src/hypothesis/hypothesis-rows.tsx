import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { Standings } from "@weighhouse/campaign/standings";
import { formatLog10B } from "@weighhouse/figures/standing-numbers";
import { KeptLink } from "@/look/kept-link";
import { HypothesisMark } from "@/look/hypothesis-mark";
import { Num, tailOf } from "@/look/number";
import { Table } from "@/look/table";
import { Time } from "@/look/time";

/** The hypotheses as a table: team, when filed, on how many quantities it speaks, how it stands. */
export function HypothesisRows(props: { document: CampaignDocument; standings: Standings | null }) {
  const { document, standings } = props;
  const teams = new Map(document.teams.map((each) => [each.key, each.title]));
  const places = new Map(standings?.hypotheses.map((each, place) => [each.key, place]));
  const tail = tailOf(
    standings?.hypotheses.map((each) => formatLog10B(each.log10BayesFactor)) ?? [],
  );
  return (
    <Table
      caption="Hypotheses"
      stackBelow="middle"
      paired
      head={
        <tr>
          <th scope="col">Hypothesis</th>
          <th scope="col">Team</th>
          <th scope="col">Registered</th>
          <th scope="col" className="number">
            Predicts <span className="gloss">of {document.measurands.length} quantities</span>
          </th>
          <th scope="col" className="number">
            Rank
          </th>
          <th scope="col" className="number">
            log₁₀ B
          </th>
        </tr>
      }
    >
      {document.hypotheses.map((hypothesis, index) => {
        const place = places.get(hypothesis.key);
        const standing = place === undefined ? undefined : standings?.hypotheses[place];
        return (
          <tr key={hypothesis.key}>
            <th scope="row" className="xl:max-w-[36em]">
              <HypothesisMark index={index} />
              <KeptLink
                className="link font-semibold"
                href={`/campaigns/${document.campaign.key}/hypotheses/${hypothesis.key}`}
              >
                {hypothesis.title}
              </KeptLink>
              {hypothesis.statement ? (
                <span className="line-clamp-2 text-[13.5px] text-quiet">
                  {hypothesis.statement}
                </span>
              ) : null}
            </th>
            <td data-label="Team" data-whole>
              {hypothesis.team ? (teams.get(hypothesis.team) ?? hypothesis.team) : null}
            </td>
            <td data-label="Registered" data-whole>
              {hypothesis.registeredAt ? <Time at={hypothesis.registeredAt} /> : null}
            </td>
            <td data-label="Predicts" data-whole className="number">
              {hypothesis.predictions.length}
            </td>
            <td data-label="Rank" className="number">
              {standing ? (
                <Num
                  text={String(standing.rank)}
                  exact={standing.rank}
                  at={`/hypotheses/${place}/rank`}
                />
              ) : null}
            </td>
            <td data-label="log₁₀ B" className="number">
              {standing ? (
                <Num
                  text={formatLog10B(standing.log10BayesFactor)}
                  exact={standing.log10BayesFactor}
                  at={`/hypotheses/${place}/log10BayesFactor`}
                  tail={tail}
                />
              ) : null}
            </td>
          </tr>
        );
      })}
    </Table>
  );
}
