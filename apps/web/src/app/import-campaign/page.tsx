import type { Metadata } from "next";
import { redirect } from "next/navigation";
import { ImportForm } from "@/forms/import/import-form";
import { Section } from "@/look/section";
import { readActor } from "@/server/reader";

export const metadata: Metadata = { title: "Import a campaign document" };

export default async function ImportPage() {
  if ((await readActor()) === null) redirect("/sign-in?next=/import-campaign");
  return (
    <>
      <h1 className="my-3">Import a campaign document</h1>
      <Section title="Document" gloss="weighhouse-campaign/1">
        <ImportForm />
      </Section>
    </>
  );
}
