"use client";

import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { ReactNode } from "react";
import { useFormContext } from "react-hook-form";
import { Field, TextArea } from "@/look/field";
import { Section } from "@/look/section";
import { followingKey } from "../entered-text";
import { FieldRow } from "../form-frame";
import type { HypothesisDraft } from "./hypothesis-draft";
import { JsonEntry } from "./json-entry";
import type { Registrant } from "./registrant";

/** What the hypothesis says, in words and for whom. */
export function StatementStep(props: {
  document: CampaignDocument;
  registrant: Registrant;
  amending: boolean;
  children: ReactNode;
}) {
  const { document, registrant, amending } = props;
  const { register, formState, setValue, getValues } = useFormContext<HypothesisDraft>();
  const { errors } = formState;
  const team = document.teams.find(({ key }) => key === registrant.team);
  const title = register("title");
  return (
    <Section title="The hypothesis" gloss={team ? `for ${team.title}` : "for no team"}>
      <Field
        label="Title"
        help="A few words that name the hypothesis in tables and on the beam."
        error={errors.title?.message}
        {...title}
        onChange={(event) => {
          const [key, before] = getValues(["key", "title"]);
          const next = followingKey(key, { before, now: event.target.value });
          void title.onChange(event);
          if (!amending && next !== key) setValue("key", next, { shouldDirty: true });
        }}
      />
      <TextArea
        label="Statement"
        help="What is the case, if this is right? Plain words, for a reader who knows none of the models."
        rows={5}
        error={errors.statement?.message}
        {...register("statement")}
      />
      <FieldRow>
        <Field
          label="Key"
          help={
            amending
              ? "Stays as it was registered."
              : "Its name in addresses and files: a-z, 0-9 and -. Can’t change later."
          }
          readOnly={amending}
          autoComplete="off"
          error={errors.key?.message}
          {...register("key")}
        />
        <Field
          label="Group"
          help="Variants of one idea share one weight. Leave empty if it stands alone."
          list="hypothesis-groups"
          autoComplete="off"
          error={errors.group?.message}
          {...register("group")}
        />
        <Field
          label="Weight"
          help="Prior weight beside the others; 1 unless the campaign agreed otherwise."
          inputMode="decimal"
          autoComplete="off"
          error={errors.weight?.message}
          {...register("weight")}
        />
      </FieldRow>
      <datalist id="hypothesis-groups">
        {groupsOf(document).map((group) => (
          <option key={group}>{group}</option>
        ))}
      </datalist>
      <div className="mt-1 flex flex-wrap gap-3">{props.children}</div>
      <JsonEntry document={document} keepKey={amending ? getValues("key") : null} />
    </Section>
  );
}

function groupsOf(document: CampaignDocument): string[] {
  return [...new Set(document.hypotheses.flatMap(({ group }) => group ?? []))];
}
