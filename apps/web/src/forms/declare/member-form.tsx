"use client";

import type { Team } from "@weighhouse/campaign/document";
import { useMemo } from "react";
import { useFormContext, useWatch } from "react-hook-form";
import { z } from "zod";
import { Choice, Field } from "@/look/field";
import { useTRPCClient } from "@/trpc/client";
import { FieldRow } from "../form-frame";
import { formSchema } from "../form-schema";
import { emptyMember, memberContent, type MemberDraft } from "./part-drafts";
import { PartForm } from "./part-form";

// The server's own has the campaign's key besides, which no field holds.
const memberSchema = z.strictObject({
  email: z.email({ error: "an e-mail address" }),
  role: z.enum(["coordinator", "member", "reader"]),
  team: z.string().nullable(),
});

export function MemberForm(props: { campaign: string; teams: readonly Team[] }) {
  const { campaign, teams } = props;
  const client = useTRPCClient();
  const schema = useMemo(
    () =>
      formSchema<MemberDraft, z.output<typeof memberSchema>>({
        schema: memberSchema,
        content: memberContent,
      }),
    [],
  );
  return (
    <PartForm
      name={`member:${campaign}`}
      label="Add a member"
      button="Add member"
      defaults={emptyMember}
      schema={schema}
      send={(member) => client.members.add.mutate({ key: campaign, ...member })}
      done={({ email }) => `${email} is in.`}
    >
      <Fields teams={teams} />
    </PartForm>
  );
}

function Fields({ teams }: { teams: readonly Team[] }) {
  const { register, formState } = useFormContext<MemberDraft>();
  const role = useWatch<MemberDraft, "role">({ name: "role" });
  const { errors } = formState;
  return (
    <FieldRow>
      <Field
        label="E-mail"
        type="email"
        help="Of an account on this server: the person makes one first."
        autoComplete="off"
        error={errors.email?.message}
        {...register("email")}
      />
      <Choice label="Role" help={roleHelp[role]} error={errors.role?.message} {...register("role")}>
        <option value="member">member</option>
        <option value="coordinator">coordinator</option>
        <option value="reader">reader</option>
      </Choice>
      <Choice
        label="Team"
        help="Whose hypotheses they may register."
        error={errors.team?.message}
        {...register("team")}
      >
        <option value="">no team</option>
        {teams.map(({ key, title }) => (
          <option key={key} value={key}>
            {title}
          </option>
        ))}
      </Choice>
    </FieldRow>
  );
}

const roleHelp: Record<MemberDraft["role"], string> = {
  member: "Registers hypotheses of their team and posts measurements.",
  coordinator: "Declares, closes registration and adds people, besides what members do.",
  reader: "Reads a campaign that only members see.",
};
