import Link from "next/link";
import { Empty, Notice } from "@/look/notice";
import { Section } from "@/look/section";
import { Time } from "@/look/time";
import type { CampaignView } from "@/server/campaign";
import { hasPassed } from "../has-passed";
import { AmendCampaignForm } from "./campaign-forms";
import { CloseRegistration } from "./close-registration";
import { DeclaredTable } from "./declared-table";
import { MeasurandForm } from "./measurand-form";
import { FacilityForm, TeamForm } from "./named-forms";
import { ObservableForm } from "./observable-form";
import { countOf, parts, partTitles, type Part } from "./parts";
import { SharedErrorForm } from "./shared-error-form";

const glosses: Record<Part, string> = {
  observables: "kinds of quantity, each with a unit and a scale",
  quantities: "measurands: what is predicted and measured, with their no-model ranges",
  "shared-errors": "what several measurements have wrong together",
  facilities: "where measurements come from",
  teams: "who stands behind hypotheses",
  campaign: "the campaign’s own fields",
  registration: "predictions filed later are marked as after data",
};

/** The coordinator's page: one part at a time, what there is of it and a form for one more. */
export function DeclareView({ view, part }: { view: CampaignView; part: Part }) {
  const { document } = view;
  return (
    <div className="grid gap-x-6 lg:grid-cols-[190px_1fr]">
      <PartLinks view={view} current={part} />
      <div className="min-w-0">
        <Section title={partTitles[part]} gloss={glosses[part]}>
          {countOf(document, part) ? <DeclaredTable document={document} part={part} /> : null}
          <PartBody view={view} part={part} />
        </Section>
      </div>
    </div>
  );
}

function PartLinks({ view, current }: { view: CampaignView; current: Part }) {
  const base = `/campaigns/${view.document.campaign.key}`;
  const link =
    "flex justify-between gap-3 border-l-3 border-transparent py-1 pl-2.5 text-quiet no-underline hover:text-ink aria-[current]:border-brass aria-[current]:text-ink";
  return (
    <nav aria-label="Parts" className="mb-4 text-[14.5px]">
      <ul className="grid list-none grid-cols-2 gap-x-4 sm:grid-cols-3 lg:grid-cols-1">
        {parts.map((part) => (
          <li key={part}>
            <Link
              className={link}
              href={`${base}/declare/${part}`}
              aria-current={part === current ? "page" : undefined}
            >
              {partTitles[part]} <span>{countOf(view.document, part)}</span>
            </Link>
          </li>
        ))}
        <li>
          <Link className={link} href={`${base}/members`}>
            People
          </Link>
        </li>
        <li>
          <Link className={link} href={`${base}/webhooks`}>
            Webhooks
          </Link>
        </li>
      </ul>
    </nav>
  );
}

function PartBody({ view, part }: { view: CampaignView; part: Part }) {
  const { document } = view;
  switch (part) {
    case "observables":
      return (
        <Form title="Declare an observable">
          <ObservableForm document={document} />
        </Form>
      );
    case "quantities":
      return document.observables.length === 0 ? (
        <NeedsObservable base={`/campaigns/${document.campaign.key}`} />
      ) : (
        <Form title="Declare a quantity">
          <MeasurandForm document={document} />
        </Form>
      );
    case "shared-errors":
      return (
        <Form title="Declare a shared error">
          <SharedErrorForm document={document} />
        </Form>
      );
    case "facilities":
      return (
        <Form title="Declare a facility">
          <FacilityForm document={document} />
        </Form>
      );
    case "teams":
      return (
        <Form title="Add a team">
          <TeamForm document={document} />
        </Form>
      );
    case "campaign":
      return <AmendCampaignForm campaign={document.campaign} visibility={view.visibility} />;
    case "registration":
      return <Registration view={view} />;
  }
}

function Form({ title, children }: { title: string; children: React.ReactNode }) {
  return (
    <>
      <h3 className="mt-5 mb-3 first:mt-0">{title}</h3>
      {children}
    </>
  );
}

function NeedsObservable({ base }: { base: string }) {
  return (
    <Empty title="First an observable.">
      A quantity is an observable in a window.{" "}
      <Link className="link" href={`${base}/declare/observables`}>
        Declare an observable
      </Link>
    </Empty>
  );
}

function Registration({ view }: { view: CampaignView }) {
  const { key, registrationCloses: closes } = view.document.campaign;
  const count = view.document.hypotheses.length;
  if (closes !== null && hasPassed(closes))
    return (
      <Notice label="Closed.">
        Registration closed on <Time at={closes} />, with {count}{" "}
        {count === 1 ? "hypothesis" : "hypotheses"} on record now.
      </Notice>
    );
  return (
    <>
      <p className="mb-3">
        {count === 0
          ? "No hypothesis is"
          : count === 1
            ? "One hypothesis is"
            : `${count} hypotheses are`}{" "}
        registered so far.{" "}
        {closes === null ? (
          "No closing date is set."
        ) : (
          <>
            It closes by itself on <Time at={closes} />.
          </>
        )}
      </p>
      <CloseRegistration campaign={key} />
    </>
  );
}
