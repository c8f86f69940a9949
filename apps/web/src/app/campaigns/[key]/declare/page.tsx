import { redirect } from "next/navigation";
import { firstMissing } from "@/forms/declare/parts";
import { readCampaign } from "@/server/campaign";

/** The coordinator's page opens at the first part that is still empty. */
export default async function DeclarePage(props: { params: Promise<{ key: string }> }) {
  const { key } = await props.params;
  const { document } = await readCampaign(key, null);
  redirect(`/campaigns/${key}/declare/${firstMissing(document)}`);
}
