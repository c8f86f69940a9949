import type { Metadata } from "next";
import Link from "next/link";
import { CampaignFrame } from "@/campaign/campaign-frame";
import { MembersOnly } from "@/forms/members-only";
import { PostOne } from "@/forms/post/post-one";
import { PostTable } from "@/forms/post/post-table";
import { Empty } from "@/look/notice";
import { Section } from "@/look/section";
import { readCampaign } from "@/server/campaign";
import { readActor } from "@/server/reader";

export const metadata: Metadata = { title: "Post measurements" };

const ways = [
  { way: "one", title: "One measurement" },
  { way: "table", title: "A table" },
] as const;

export default async function PostPage(props: {
  params: Promise<{ key: string }>;
  searchParams: Promise<{ by?: string | string[] }>;
}) {
  const { key } = await props.params;
  const { by } = await props.searchParams;
  const [view, actor] = await Promise.all([readCampaign(key, null), readActor()]);
  const way = by === "table" ? "table" : "one";
  const may = view.role === "member" || view.role === "coordinator";
  return (
    <CampaignFrame campaignKey={key}>
      {may ? (
        <Section title="Post measurements">
          <nav aria-label="How" className="mb-4 flex gap-5">
            {ways.map((each) => (
              <Link
                key={each.way}
                href={`/campaigns/${key}/post?by=${each.way}`}
                aria-current={each.way === way ? "page" : undefined}
                className="border-b-3 border-transparent pb-0.5 text-quiet no-underline hover:text-ink aria-[current]:border-brass aria-[current]:text-ink"
              >
                {each.title}
              </Link>
            ))}
          </nav>
          {view.document.measurements.length > 0 ? (
            <p className="mb-4 text-[14px] text-quiet">
              To correct, set aside or withdraw one, open it from its quantity’s page; to{" "}
              <Link className="link" href={`/campaigns/${key}/withdraw`}>
                withdraw many at once
              </Link>
              , say whose and when.
            </p>
          ) : null}
          {view.document.measurands.length === 0 ? (
            <Empty title="There is no quantity to measure yet.">
              The coordinator declares quantities first.
            </Empty>
          ) : way === "table" ? (
            <PostTable document={view.document} />
          ) : (
            <PostOne document={view.document} />
          )}
        </Section>
      ) : (
        <MembersOnly path={`/campaigns/${key}/post`} signedIn={actor !== null}>
          Members and coordinators post measurements.
        </MembersOnly>
      )}
    </CampaignFrame>
  );
}
