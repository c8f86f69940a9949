import type { Metadata } from "next";
import { headers } from "next/headers";
import { CitationView } from "@/citation/citation-view";
import { readFor } from "@/server/reader";

interface Props {
  params: Promise<{ code: string }>;
}

export async function generateMetadata(props: Props): Promise<Metadata> {
  return { title: `Cited standings ${(await props.params).code}` };
}

export default async function CitePage(props: Props) {
  const { code } = await props.params;
  const citation = await readFor(`/cite/${code}`, (caller) => caller.standings.cited({ code }));
  return <CitationView citation={citation} origin={await originOf()} />;
}

/** The address that the reader came by, as his browser would give it to others. */
async function originOf(): Promise<string> {
  const sent = await headers();
  const host = sent.get("x-forwarded-host") ?? sent.get("host") ?? "localhost";
  const scheme = sent.get("x-forwarded-proto") ?? "http";
  return `${scheme}://${host}`;
}
