import { kindInWords } from "@weighhouse/campaign/kind-words";
import type { Metadata } from "next";
import Link from "next/link";
import { notFound } from "next/navigation";
import { CampaignFrame } from "@/campaign/campaign-frame";
import { RemarkForm } from "@/forms/records/remark-form";
import { EntryCheck } from "@/ledger/entry-check";
import { RemarkRows } from "@/ledger/remark-rows";
import { Section } from "@/look/section";
import { Time } from "@/look/time";
import { readCampaign } from "@/server/campaign";
import { readFor } from "@/server/reader";

interface Props {
  params: Promise<{ key: string; seq: string }>;
}

export async function generateMetadata(props: Props): Promise<Metadata> {
  return { title: `Entry ${(await props.params).seq}` };
}

export default async function EntryPage(props: Props) {
  const { key, seq: text } = await props.params;
  if (!/^(0|[1-9]\d{0,14})$/.test(text)) notFound();
  const seq = Number(text);
  const path = `/campaigns/${key}/ledger`;
  const read = await readFor(`${path}/${seq}`, (caller) => caller.ledger.entry({ key, seq }));
  const { entry } = read;
  const [view, said] = await Promise.all([
    readCampaign(key, null),
    readFor(`${path}/${seq}`, (caller) => caller.ledger.remarks({ key })),
  ]);
  const remarks = said.remarks.filter(({ on }) => on === seq);
  const member = view.role === "member" || view.role === "coordinator";
  return (
    <CampaignFrame campaignKey={key}>
      <Section title={`Entry ${seq}`} gloss={entry.kind}>
        <dl className="facts">
          <dt>What</dt>
          <dd>{kindInWords(entry.kind)}</dd>
          <dt>Time</dt>
          <dd>
            <Time at={entry.at} /> <code className="text-quiet">{entry.at}</code>
          </dd>
          <dt>By</dt>
          <dd>
            {"system" in entry.by
              ? "the clock"
              : `${read.name ?? "a person no longer named"}${entry.by.team ? `, ${entry.by.team}` : ""}`}
          </dd>
          <dt>Leaf hash</dt>
          <dd>
            <code>{read.leafHash}</code>
          </dd>
          <dt>Digest of the content</dt>
          <dd>
            <code>{entry.payloadSha256}</code>
          </dd>
        </dl>
        <nav aria-label="Neighbouring entries" className="mt-3 flex gap-5 text-[14px]">
          {seq > 0 ? (
            <Link className="link" href={`${path}/${seq - 1}`}>
              entry before
            </Link>
          ) : null}
          {seq + 1 < read.head.size ? (
            <Link className="link" href={`${path}/${seq + 1}`}>
              entry after
            </Link>
          ) : null}
        </nav>
      </Section>
      <Section title="Is it in the ledger?" gloss={`against the head of ${read.head.size} entries`}>
        <EntryCheck
          evidence={{
            entry,
            payload: read.payload,
            head: read.head,
            proof: read.proof,
            keys: read.keys,
          }}
        />
        <details className="mt-3">
          <summary className="cursor-pointer text-quiet">The signed tree head</summary>
          <pre className="mt-2 whitespace-pre-wrap">
            <code>{read.head.note}</code>
          </pre>
        </details>
      </Section>
      <Section title="Content" gloss="canonical JSON (RFC 8785), as it was hashed">
        <pre className="max-w-full whitespace-pre-wrap">
          <code>{readable(read.payload)}</code>
        </pre>
      </Section>
      {remarks.length > 0 || member ? (
        <Section title="Remarks" gloss="each an entry of its own" id="remarks">
          {remarks.length > 0 ? <RemarkRows remarks={remarks} path={path} /> : null}
          {member ? <RemarkForm campaign={key} on={seq} /> : null}
        </Section>
      ) : null}
    </CampaignFrame>
  );
}

/** Indented for reading; what was hashed is the same without white space. */
function readable(payload: string): string {
  return JSON.stringify(JSON.parse(payload), null, 2);
}
