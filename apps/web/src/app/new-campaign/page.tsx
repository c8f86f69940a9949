import type { Metadata } from "next";
import { redirect } from "next/navigation";
import { NewCampaignForm } from "@/forms/declare/campaign-forms";
import { Section } from "@/look/section";
import { readActor } from "@/server/reader";

export const metadata: Metadata = { title: "Declare a campaign" };

export default async function NewCampaignPage() {
  if ((await readActor()) === null) redirect("/sign-in?next=/new-campaign");
  return (
    <>
      <h1 className="my-3">Declare a campaign</h1>
      <Section title="The campaign itself" gloss="a ledger of its own begins with it">
        <p className="mb-4 text-quiet">
          You become its coordinator: quantities, facilities, teams and people follow on the next
          pages.
        </p>
        <NewCampaignForm />
      </Section>
    </>
  );
}
