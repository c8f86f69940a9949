import type { CampaignDocument, Hypothesis } from "@weighhouse/campaign/document";
import type { Standings } from "@weighhouse/campaign/standings";
import { KeptLink } from "@/look/kept-link";
import { HypothesisMark } from "@/look/hypothesis-mark";
import { Section } from "@/look/section";
import { PairsTable } from "@/standings/pairs-table";
import { inWindowOrder, rankedHypotheses } from "@/standings/table-rows";
import { FiledPredictions } from "./filed-predictions";
import { filedPredictions } from "./filed-rows";
import { HypothesisStandingFacts } from "./hypothesis-standing-facts";
import { ParameterRows } from "./parameter-rows";

/** One hypothesis: what it states, how it stands, its predictions filed before data and after. */
export function HypothesisView(props: {
  document: CampaignDocument;
  standings: Standings | null;
  hypothesis: Hypothesis;
  index: number;
}) {
  const { document, standings, hypothesis } = props;
  const base = `/campaigns/${document.campaign.key}`;
  const team = document.teams.find((each) => each.key === hypothesis.team);
  const place = standings?.hypotheses.findIndex((each) => each.key === hypothesis.key) ?? -1;
  const standing = standings?.hypotheses[place];
  const { before, after } = filedPredictions(document, standings, hypothesis);
  const pairs = (standings?.pairs ?? [])
    .map((pair, index) => ({ pair, index }))
    .filter(({ pair }) => pair.a === hypothesis.key || pair.b === hypothesis.key);
  return (
    <>
      <div className="grid gap-x-5 lg:grid-cols-[1.3fr_1fr]">
        <Section
          title={hypothesis.title ?? hypothesis.key}
          gloss={team?.title ?? undefined}
          id="statement"
        >
          <p className="mb-2 text-[13.5px] text-quiet">
            <HypothesisMark index={props.index} />
            <code>{hypothesis.key}</code>
          </p>
          {hypothesis.statement ? (
            <p className="font-serif text-[16.5px] whitespace-pre-line">{hypothesis.statement}</p>
          ) : (
            <p className="text-quiet">It was registered without a statement in words.</p>
          )}
        </Section>
        <Section title="How it stands" id="standing">
          <HypothesisStandingFacts
            hypothesis={hypothesis}
            titleOf={(key) => document.measurands.find((each) => each.key === key)?.title ?? key}
            standing={standing ? { row: standing, at: `/hypotheses/${place}` } : null}
          />
        </Section>
      </div>
      <Section title="Filed before data" gloss="these count" id="before">
        {before.length > 0 ? (
          <FiledPredictions rows={before} base={base} />
        ) : (
          <p className="text-quiet">
            None: in the standings this hypothesis is silent on everything.
          </p>
        )}
      </Section>
      {after.length > 0 ? (
        <Section title="Filed after data" gloss="listed, not counted" id="after">
          <FiledPredictions rows={after} base={base} />
        </Section>
      ) : null}
      <Silent {...{ document, hypothesis, base }} />
      {hypothesis.parameters.length > 0 ? (
        <Section title="Parameters" gloss="prior, and posterior given the data" id="parameters">
          <ParameterRows
            parameters={hypothesis.parameters}
            estimates={standing?.parameters ?? []}
            at={`/hypotheses/${place}/parameters`}
          />
        </Section>
      ) : null}
      {standings && pairs.length > 0 ? (
        <Section
          title="Against the others"
          gloss="where the two figures disagree, silence decides"
          id="pairs"
        >
          <PairsTable pairs={pairs} hypotheses={rankedHypotheses(standings, document)} />
        </Section>
      ) : null}
    </>
  );
}

function Silent(props: { document: CampaignDocument; hypothesis: Hypothesis; base: string }) {
  const spoken = new Set(props.hypothesis.predictions.map((each) => each.measurand));
  const silent = inWindowOrder(props.document.measurands).filter((each) => !spoken.has(each.key));
  if (silent.length === 0) return null;
  return (
    <Section title="Silent on" gloss="charged the no-model range (reference) there" id="silent">
      <ul className="flex list-none flex-wrap gap-x-6 gap-y-1">
        {silent.map((each) => (
          <li key={each.key}>
            <KeptLink className="link" href={`${props.base}/quantities/${each.key}`}>
              {each.title}
            </KeptLink>
            {props.hypothesis.withheld.includes(each.key) ? (
              <span className="text-quiet"> (withheld)</span>
            ) : null}
          </li>
        ))}
      </ul>
    </Section>
  );
}
