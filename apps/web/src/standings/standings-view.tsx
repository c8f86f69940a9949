import { ButtonLink } from "@/look/button";
import { Empty, Notice } from "@/look/notice";
import { Section } from "@/look/section";
import { readCampaign, readStandings, readTimeline } from "@/server/campaign";
import type { CampaignView } from "@/server/campaign";
import { AsOf } from "./as-of";
import { Beam } from "./beam";
import { beamView } from "./beam-input";
import { Caution } from "./caution";
import { DeclaredRules } from "./declared-rules";
import { MovedNote } from "./moved-note";
import { Pairs } from "./pairs-table";
import { ScoringProblems } from "./scoring-problems";
import { StandingsTable } from "./standings-table";
import { rankedHypotheses, verdictGrid } from "./table-rows";
import { TimelineSection } from "./timeline-section";
import { VerdictGrid } from "./verdict-grid";
import { Warnings } from "./warnings";
import { digestOf } from "./what-moved";

/** The campaign's front page, now or as of a size; it lies inside the campaign's frame. */
export async function StandingsView(props: { campaignKey: string; size: number | null }) {
  const [scored, steps] = await Promise.all([
    readStandings(props.campaignKey, props.size),
    readTimeline(props.campaignKey),
  ]);
  // The document of the very size that was scored: while the scorer works, a newer one has parts
  // that these standings know nothing of.
  const view = await readCampaign(props.campaignKey, scored.size);
  const asOf = (
    <AsOf
      size={scored.size}
      latestSize={scored.latestSize}
      at={view.at}
      steps={steps.map((step) => step.size)}
    />
  );
  if (scored.standings === null) {
    return (
      <Section title="The beam">
        <ScoringProblems problems={scored.problems} />
        {asOf}
      </Section>
    );
  }
  const { standings } = scored;
  const { document } = view;
  const hypotheses = rankedHypotheses(standings, document);
  // What is silent on everything by its definition has no column.
  const inGrid = hypotheses.filter((each) => each.registered);
  const base = `/campaigns/${props.campaignKey}`;
  return (
    <div data-standings-size={scored.size} data-standings-state={scored.state}>
      {scored.state === "scoring" ? (
        <output className="block">
          <Notice>Newer entries are being scored; this is the last state before them.</Notice>
        </output>
      ) : null}
      {document.campaign.summary ? (
        <p className="mb-4 max-w-[105ch] whitespace-pre-line">{document.campaign.summary}</p>
      ) : null}
      <Section title="The beam" id="beam">
        {hypotheses.length > 0 ? (
          <Beam view={beamView(standings, hypotheses)} />
        ) : (
          <NoHypothesis view={view} base={base} />
        )}
        {asOf}
      </Section>
      {hypotheses.length > 0 ? (
        <Section title="Standings" id="standings">
          <StandingsTable hypotheses={hypotheses} base={base} />
          <Caution standings={standings} />
        </Section>
      ) : null}
      <div className="grid items-start gap-x-5 lg:grid-cols-[2fr_3fr]">
        <Section title="What moved" id="moved">
          {props.size === null ? (
            <MovedNote
              campaign={props.campaignKey}
              digest={digestOf(standings, document, { size: scored.size, at: view.at })}
            />
          ) : (
            <p className="text-quiet">This is an earlier state; nothing moves here any more.</p>
          )}
        </Section>
        <Section title="Warnings" id="warnings">
          <Warnings standings={standings} document={document} />
        </Section>
      </div>
      <Section title="Verdicts" gloss="tension in σ first" id="verdicts">
        {document.measurands.length > 0 ? (
          <VerdictGrid
            rows={verdictGrid(standings, document, inGrid)}
            hypotheses={inGrid}
            base={base}
          />
        ) : (
          <NoQuantity view={view} base={base} />
        )}
      </Section>
      <TimelineSection
        steps={steps}
        now={{ size: scored.size, at: view.at }}
        hypotheses={hypotheses}
      />
      {standings.pairs.length > 0 ? (
        <Section title="Pairs" gloss="where the two figures disagree, silence decides" id="pairs">
          <Pairs pairs={standings.pairs} hypotheses={hypotheses} />
        </Section>
      ) : null}
      <Section title="As declared" id="declared">
        <DeclaredRules document={document} />
      </Section>
    </div>
  );
}

function NoHypothesis({ view, base }: { view: CampaignView; base: string }) {
  const member = view.role === "member" || view.role === "coordinator";
  return (
    <Empty title="Nothing hangs on the beam yet.">
      <p>
        A team registers its hypothesis: a statement, and what it predicts of each quantity, with
        its theory error (tolerance). Filed before the data, it is weighed by them.
      </p>
      {member ? (
        <p className="mt-3">
          <ButtonLink href={`${base}/register`}>Register a hypothesis</ButtonLink>
        </p>
      ) : null}
    </Empty>
  );
}

function NoQuantity({ view, base }: { view: CampaignView; base: string }) {
  return (
    <Empty title="No quantity (measurand) is declared yet.">
      <p>
        The coordinator declares what is to be measured, in which window, and the no-model range
        (reference) that silence is charged with.
      </p>
      {view.role === "coordinator" ? (
        <p className="mt-3">
          <ButtonLink href={`${base}/declare`}>Declare the first</ButtonLink>
        </p>
      ) : null}
    </Empty>
  );
}
