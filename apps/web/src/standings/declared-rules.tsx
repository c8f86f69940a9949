import type { CampaignDocument } from "@weighhouse/campaign/document";
import { formatNumber } from "@weighhouse/figures/numbers";
import { Time } from "@/look/time";

/** What the coordinator declared for the whole campaign: the rule of verdicts, dates, who and where. */
export function DeclaredRules({ document }: { document: CampaignDocument }) {
  const { campaign } = document;
  const { coverage, pass, fail } = campaign.rule;
  return (
    <dl className="facts">
      <dt>Rule of verdicts</dt>
      <dd>
        A theory error (tolerance) reaches {formatNumber(coverage)} sd either way; pass from a
        probability of {formatNumber(pass)}, fail from {formatNumber(1 - fail)} beyond.
      </dd>
      <dt>None of these</dt>
      <dd>
        {campaign.noneOfThese.weight > 0
          ? `ranked, with weight ${formatNumber(campaign.noneOfThese.weight)}`
          : "not ranked among the hypotheses"}
      </dd>
      <dt>Dates</dt>
      <dd>
        {campaign.registrationCloses ? (
          <>
            registration closes <Time at={campaign.registrationCloses} />
          </>
        ) : (
          "registration without an end"
        )}
        {campaign.dataCloses ? (
          <>
            ; data close <Time at={campaign.dataCloses} />
          </>
        ) : null}
      </dd>
      <Titles term="Teams" titles={document.teams.map((team) => team.title ?? team.key)} />
      <Titles
        term="Facilities"
        titles={document.facilities.map((facility) => facility.title ?? facility.key)}
      />
      <Titles term="Shared errors" titles={document.sharedErrors.map(sharedErrorInWords)} />
    </dl>
  );
}

function Titles({ term, titles }: { term: string; titles: string[] }) {
  if (titles.length === 0) return null;
  return (
    <>
      <dt>{term}</dt>
      <dd>{titles.join("; ")}</dd>
    </>
  );
}

function sharedErrorInWords(error: CampaignDocument["sharedErrors"][number]): string {
  const sd = error.relative
    ? `${formatNumber(error.sd * 100)}\u00a0% of the value`
    : formatNumber(error.sd);
  return `${error.title ?? error.key} (sd ${sd}${error.per === "batch" ? ", anew for each batch" : ""})`;
}
