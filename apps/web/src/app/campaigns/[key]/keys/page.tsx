import type { ListedApiKey } from "@weighhouse/desk/list-api-keys";
import type { Metadata } from "next";
import Link from "next/link";
import { CampaignFrame } from "@/campaign/campaign-frame";
import { KeyForm } from "@/forms/keys/key-form";
import { KeyTable } from "@/forms/keys/key-table";
import { MembersOnly } from "@/forms/members-only";
import { Empty } from "@/look/notice";
import { Section } from "@/look/section";
import { readCampaign } from "@/server/campaign";
import { readActor, readFor } from "@/server/reader";

export const metadata: Metadata = { title: "Keys" };

export default async function KeysPage(props: { params: Promise<{ key: string }> }) {
  const { key } = await props.params;
  const path = `/campaigns/${key}/keys`;
  const [view, actor] = await Promise.all([readCampaign(key, null), readActor()]);
  if (view.role !== "member" && view.role !== "coordinator") {
    return (
      <CampaignFrame campaignKey={key}>
        <MembersOnly path={path} signedIn={actor !== null}>
          Programs act by keys that members make.
        </MembersOnly>
      </CampaignFrame>
    );
  }
  const keys = await readFor(path, (caller) => caller.apiKeys.list({ key }));
  return (
    <CampaignFrame campaignKey={key}>
      <Section
        title="Keys"
        gloss="by which programs act for you in this campaign"
        actions={
          <Link className="link text-[14px]" href={`/programs?campaign=${key}`}>
            What programs can do
          </Link>
        }
      >
        <Keys campaign={key} keys={keys} everybodys={view.role === "coordinator"} />
      </Section>
      <Section title="Make a key">
        <p className="mb-3 text-quiet">
          A key acts as you, in this campaign alone, and does no more than what you tick. Whoever
          has it can do that in your name: keep it out of code and mails.
        </p>
        <KeyForm campaign={key} />
      </Section>
    </CampaignFrame>
  );
}

function Keys(props: { campaign: string; keys: readonly ListedApiKey[]; everybodys: boolean }) {
  const { campaign, everybodys } = props;
  const holding = props.keys.filter(({ state }) => state === "holds");
  const ended = props.keys.filter(({ state }) => state !== "holds");
  return (
    <>
      {holding.length === 0 ? (
        <Empty title="No key holds.">
          Make one below for a program that posts measurements or reads the standings.
        </Empty>
      ) : (
        <KeyTable
          campaign={campaign}
          keys={holding}
          caption="Keys that hold"
          withMakers={everybodys}
        />
      )}
      {ended.length === 0 ? null : (
        <details className="mt-3">
          <summary className="cursor-pointer text-quiet">
            Keys that ended <span className="gloss">{ended.length}</span>
          </summary>
          <KeyTable
            campaign={campaign}
            keys={ended}
            caption="Keys that ended"
            withMakers={everybodys}
          />
        </details>
      )}
    </>
  );
}
