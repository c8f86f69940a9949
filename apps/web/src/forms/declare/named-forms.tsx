"use client";

import type { CampaignDocument } from "@weighhouse/campaign/document";
import { payloadSchemas, type Payload } from "@weighhouse/campaign/entries";
import { useMemo } from "react";
import { useTRPCClient } from "@/trpc/client";
import { problemsInCampaign } from "../check-in-campaign";
import { formSchema } from "../form-schema";
import { emptyNamed, namedContent, type NamedDraft } from "./part-drafts";
import { PartForm } from "./part-form";
import { TitleAndKey } from "./title-and-key";

export function FacilityForm({ document }: { document: CampaignDocument }) {
  const client = useTRPCClient();
  const { key } = document.campaign;
  const schema = useMemo(
    () =>
      formSchema<NamedDraft, Payload<"facility.declared">>({
        schema: payloadSchemas["facility.declared"],
        content: namedContent,
        further: (part) => problemsInCampaign(document, { list: "facilities", part }),
      }),
    [document],
  );
  return (
    <PartForm
      name={`facility:${key}`}
      label="Declare a facility"
      button="Declare facility"
      defaults={emptyNamed}
      schema={schema}
      under={/^\/facilit(y|ies)(\/\d+)?(?=\/|$)/}
      send={(facility) => client.declare.facility.mutate({ key, facility })}
      done={({ title }) => `“${title}” is declared.`}
    >
      <TitleAndKey
        titleHelp="Where measurements come from: an instrument, a station, a laboratory."
        keyHelp="What stands in files of measurements: a-z, 0-9 and -."
      />
    </PartForm>
  );
}

export function TeamForm({ document }: { document: CampaignDocument }) {
  const client = useTRPCClient();
  const { key } = document.campaign;
  const schema = useMemo(
    () =>
      formSchema<NamedDraft, Payload<"team.joined">>({
        schema: payloadSchemas["team.joined"],
        content: namedContent,
        further: (part) => problemsInCampaign(document, { list: "teams", part }),
      }),
    [document],
  );
  return (
    <PartForm
      name={`team:${key}`}
      label="Add a team"
      button="Add team"
      defaults={emptyNamed}
      schema={schema}
      under={/^\/teams?(\/\d+)?(?=\/|$)/}
      send={(team) => client.teams.add.mutate({ key, team })}
      done={({ title }) => `“${title}” is in. Next: its members, under People.`}
    >
      <TitleAndKey titleHelp="The people who stand behind a hypothesis." />
    </PartForm>
  );
}
