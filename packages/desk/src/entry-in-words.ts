import type { EntryKind, Payload } from "@weighhouse/campaign/entries";
import { kindInWords } from "@weighhouse/campaign/kind-words";

/** What an entry did, for a list of news: a line, and what was said for it, if anything was. */
export type EntryInWords = { title: string; summary: string | null };

type Words = { about: string | null; summary?: string | null };
type Tellers = { [K in EntryKind]: (payload: Payload<K>) => Words };

const NAMED = 3;

const named = ({ key, title }: { key: string; title: string | null }): Words => ({
  about: title ?? key,
});

/** Total: a new kind of entry must be given its words. */
const tellers: Tellers = {
  "campaign.opened": ({ title, summary }) => ({ about: title, summary }),
  "campaign.amended": ({ title, summary }) => ({ about: title, summary }),
  "observable.declared": named,
  "measurand.declared": named,
  "measurand.closed": ({ key, reason }) => ({ about: key, summary: reason }),
  "derived.declared": named,
  "shared-error.declared": named,
  "facility.declared": named,
  "team.joined": named,
  "measurand.proposed": ({ measurand, reason }) => ({ ...named(measurand), summary: reason }),
  "reference.objected": ({ measurand, reason }) => ({ about: measurand, summary: reason }),
  "hypothesis.registered": (hypothesis) => ({
    ...named(hypothesis),
    summary: hypothesis.statement,
  }),
  "hypothesis.amended": (hypothesis) => ({ ...named(hypothesis), summary: hypothesis.statement }),
  "hypothesis.retired": ({ key, reason }) => ({ about: key, summary: reason }),
  "prediction.sealed": ({ hypothesis, measurand, until }) => ({
    about: `${measurand}, by ${hypothesis}`,
    summary: `Opens by ${until}`,
  }),
  "prediction.revealed": ({ digest }) => ({ about: digest }),
  "registration.closed": ({ by }) => ({ about: `by the ${by}` }),
  "measurements.posted": ({ measurements }) => ({
    about: listed(measurements.map(({ id }) => id)),
  }),
  "measurement.corrected": ({ measurement, reason }) => ({
    about: measurement.id,
    summary: reason,
  }),
  "measurements.withdrawn": ({ selection, reason }) => ({
    about: selection.by === "ids" ? listed(selection.ids) : `of ${selection.facility}`,
    summary: reason,
  }),
  "measurement.set-aside": ({ id, reason }) => ({ about: id, summary: reason }),
  "measurement.sealed": ({ measurand, until }) => ({
    about: measurand,
    summary: `Opens by ${until}`,
  }),
  "measurement.revealed": ({ digest }) => ({ about: digest }),
  "remark.made": ({ on, kind, text }) => ({ about: `${kind} on entry ${on}`, summary: text }),
  "standings.cited": ({ code, note }) => ({ about: code, summary: note }),
  "ledger.restored": ({ reason }) => ({ about: null, summary: reason }),
};

/** @param payload the entry's payload as it stands in the ledger, so by its kind's schema */
export function entryInWords(kind: string, payload: unknown): EntryInWords {
  const words = kindInWords(kind);
  const heading = words.charAt(0).toUpperCase() + words.slice(1);
  if (!Object.hasOwn(tellers, kind)) return { title: heading, summary: null };
  const tell = tellers[kind as EntryKind] as (payload: unknown) => Words;
  const { about, summary = null } = tell(payload);
  return { title: about === null ? heading : `${heading}: ${about}`, summary };
}

function listed(ids: string[]): string {
  const shown = ids.slice(0, NAMED).join(", ");
  return ids.length > NAMED ? `${shown} and ${ids.length - NAMED} more` : shown;
}
