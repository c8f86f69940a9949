import type { Citation } from "@weighhouse/desk/read-citation";
import Link from "next/link";
import { Notice } from "@/look/notice";
import { Section } from "@/look/section";
import { Time } from "@/look/time";
import { Beam } from "@/standings/beam";
import { beamView } from "@/standings/beam-input";
import { Caution } from "@/standings/caution";
import { DeclaredRules } from "@/standings/declared-rules";
import { Pairs } from "@/standings/pairs-table";
import { StandingsTable } from "@/standings/standings-table";
import { rankedHypotheses, verdictGrid } from "@/standings/table-rows";
import { VerdictGrid } from "@/standings/verdict-grid";
import { Warnings } from "@/standings/warnings";

/** Standings as they were cited: from the ledger's entry itself, whatever was appended since. */
export function CitationView({ citation, origin }: { citation: Citation; origin: string }) {
  const { standings, document, key, seq } = citation;
  const hypotheses = rankedHypotheses(standings, document);
  const inGrid = hypotheses.filter((each) => each.registered);
  const base = `/campaigns/${key}`;
  return (
    <>
      <p className="text-[14px] text-quiet">Cited standings</p>
      <h1 className="mt-1 mb-4 max-w-[34em]">{document.campaign.title}</h1>
      {citation.clock === "simulated" ? (
        <Notice label="Simulated clock.">
          This ledger’s times were set by hand, for a demonstration: they prove nothing about when
          anything was filed.
        </Notice>
      ) : null}
      <Section title="What this is" id="what">
        <CitationFacts citation={citation} origin={origin} />
      </Section>
      {hypotheses.length > 0 ? (
        <>
          <Section title="The beam" id="beam">
            <Beam view={beamView(standings, hypotheses)} />
          </Section>
          <Section title="Standings" id="standings">
            <StandingsTable hypotheses={hypotheses} base={base} />
            <Caution standings={standings} />
          </Section>
        </>
      ) : (
        <Section title="Standings" id="standings">
          <p className="text-quiet">No hypothesis was registered then.</p>
        </Section>
      )}
      <Section title="Warnings" id="warnings">
        <Warnings standings={standings} document={document} />
      </Section>
      {document.measurands.length > 0 ? (
        <Section title="Verdicts" gloss="tension in σ first" id="verdicts">
          <VerdictGrid
            rows={verdictGrid(standings, document, inGrid)}
            hypotheses={inGrid}
            base={base}
          />
        </Section>
      ) : null}
      {standings.pairs.length > 0 ? (
        <Section title="Pairs" gloss="where the two figures disagree, silence decides" id="pairs">
          <Pairs pairs={standings.pairs} hypotheses={hypotheses} />
        </Section>
      ) : null}
      <Section title="As declared" id="declared">
        <DeclaredRules document={document} />
      </Section>
      <p className="text-[14px]">
        <Link className="link" href={`${base}?size=${seq}`}>
          The campaign as of these {seq} entries
        </Link>
        , and{" "}
        <Link className="link" href={base}>
          as it is now
        </Link>
        .
      </p>
    </>
  );
}

function CitationFacts({ citation, origin }: { citation: Citation; origin: string }) {
  const { code, key, seq, at, note, name, by, standings } = citation;
  return (
    <dl className="facts">
      <dt>Code</dt>
      <dd>
        <code>{code}</code>, the first 40 bits of the SHA-256 of these standings
      </dd>
      <dt>To cite</dt>
      <dd className="[overflow-wrap:anywhere]">
        {origin}/cite/{code}
      </dd>
      {note === null ? null : (
        <>
          <dt>Cited in</dt>
          <dd className="[overflow-wrap:anywhere]">{note}</dd>
        </>
      )}
      <dt>Frozen</dt>
      <dd>
        <Time at={at} />{" "}
        {by === "clock"
          ? "by the clock, at data’s close"
          : `by ${name ?? "a person no longer named"}`}
      </dd>
      <dt>As of</dt>
      <dd>
        {seq} entries, tree head{" "}
        <code className="[overflow-wrap:anywhere]">{standings.asOf?.treeHead}</code>
      </dd>
      <dt>On record as</dt>
      <dd>
        <Link className="link" href={`/campaigns/${key}/ledger/${seq}`}>
          entry {seq}
        </Link>{" "}
        of the ledger, by engine {standings.engine}
      </dd>
    </dl>
  );
}
