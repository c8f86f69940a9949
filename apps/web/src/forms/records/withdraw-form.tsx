"use client";

import type { CampaignDocument } from "@weighhouse/campaign/document";
import { payloadSchemas } from "@weighhouse/campaign/entries";
import { key as partKey, measurementId, optional, time } from "@weighhouse/campaign/fields";
import type { Problem } from "@weighhouse/campaign/problem";
import type { WithdrawalPreview } from "@weighhouse/desk/withdraw-measurements";
import { useRouter } from "next/navigation";
import { useState } from "react";
import { FormProvider, useFormContext } from "react-hook-form";
import { z } from "zod";
import { Button } from "@/look/button";
import { Choice, Field, TextArea } from "@/look/field";
import { Notice } from "@/look/notice";
import { useTRPCClient } from "@/trpc/client";
import { timeFromText } from "../entered-text";
import { FormBody } from "../form-body";
import { DraftNote, FieldRow } from "../form-frame";
import { formSchema } from "../form-schema";
import { ChangesView } from "../post/changes-view";
import { refusalOf } from "../refusal";
import { useDraftForm } from "../use-draft-form";

interface WithdrawalDraft {
  ids: string;
  facility: string;
  from: string;
  to: string;
  reason: string;
}

const content = z.strictObject({
  ids: z.array(measurementId),
  facility: optional(partKey),
  from: optional(time),
  to: optional(time),
  reason: payloadSchemas["measurements.withdrawn"].shape.reason,
});
type Withdrawal = z.output<typeof content>;

const empty: WithdrawalDraft = { ids: "", facility: "", from: "", to: "", reason: "" };
const schema = formSchema<WithdrawalDraft, Withdrawal>({
  schema: content,
  content: (draft) => ({
    ids: draft.ids.split(/[\s,;]+/).filter((id) => id !== ""),
    facility: draft.facility === "" ? null : draft.facility,
    from: timeFromText(draft.from),
    to: timeFromText(draft.to),
    reason: draft.reason.trim(),
  }),
  field: (_, [field]) => String(field),
  further: async (read) => nothingChosen(read as Withdrawal),
});

/** A form sent too early must not mean everything. */
function nothingChosen({ ids, facility, from, to }: Withdrawal): Problem[] {
  if (ids.length > 0 || facility || from || to) return [];
  const allowed = "ids here, or a facility or a time below";
  return [{ pointer: "/ids", code: "missing", found: "nothing", allowed }];
}

/** Ids say all by themselves; a facility or a time is a range. */
function selectionOf({ ids, facility, from, to }: Withdrawal) {
  if (ids.length > 0) return { by: "ids" as const, ids };
  if (facility === null) return { by: "range" as const, from, to };
  return { by: "facility" as const, facility, from, to };
}

/** Withdraws a list, or all that was observed within a range, once it was seen what that is. */
export function WithdrawForm({ document }: { document: CampaignDocument }) {
  const client = useTRPCClient();
  const router = useRouter();
  const { key } = document.campaign;
  const { form, draft } = useDraftForm({ name: `withdraw:${key}`, defaults: empty, schema });
  const [seen, setSeen] = useState<{ of: Withdrawal; preview: WithdrawalPreview } | null>(null);
  const [busy, setBusy] = useState(false);
  const [refused, setRefused] = useState<string | null>(null);
  const [done, setDone] = useState<number | null>(null);

  const attempt = async (act: () => Promise<void>) => {
    setBusy(true);
    setRefused(null);
    try {
      await act();
    } catch (error) {
      setRefused(refusalOf(error).message);
    } finally {
      setBusy(false);
    }
  };
  const look = form.handleSubmit((of) =>
    attempt(async () => {
      setDone(null);
      const selection = selectionOf(of);
      const preview = await client.measurements.previewWithdrawal.mutate({ key, selection });
      setSeen({ of, preview });
    }),
  );
  const withdraw = ({ of, preview }: NonNullable<typeof seen>) =>
    attempt(async () => {
      const selection = selectionOf(of);
      await client.measurements.withdraw.mutate({ key, selection, reason: of.reason });
      setSeen(null);
      setDone(preview.ids.length);
      draft.sent();
      router.refresh();
    });
  return (
    <FormProvider {...form}>
      <form
        noValidate
        aria-label="Withdraw measurements"
        onSubmit={(event) => void look(event)}
        onChange={() => setSeen(null)}
      >
        <FormBody busy={busy}>
          <DraftNote draft={draft} />
          <Fields document={document} />
          {refused === null ? null : (
            <Notice role="alert" tone="bad" label="Refused.">
              {refused}
            </Notice>
          )}
          <Button kind={seen ? "plain" : "main"} type="submit">
            See what would be withdrawn
          </Button>
          {seen === null ? null : (
            <div className="mt-4">
              <Taken ids={seen.preview.ids} />
              <ChangesView document={document} preview={seen.preview} />
              <div className="mt-3">
                <Button kind="grave" onClick={() => void withdraw(seen)}>
                  Withdraw {countWords(seen.preview.ids.length)}
                </Button>
              </div>
            </div>
          )}
        </FormBody>
        <output className="mt-2 block">
          {done === null ? null : (
            <Notice tone="good">
              Withdrawn: {countWords(done)}. Their entries stay in the ledger.
            </Notice>
          )}
        </output>
      </form>
    </FormProvider>
  );
}

function Fields({ document }: { document: CampaignDocument }) {
  const { register, formState } = useFormContext<WithdrawalDraft>();
  const { errors } = formState;
  return (
    <>
      <TextArea
        label="Ids"
        gloss="one a line, or between commas"
        help="Empty: all that was observed within the range below."
        autoComplete="off"
        spellCheck={false}
        error={errors.ids?.message}
        {...register("ids")}
      />
      <FieldRow>
        <Choice label="Facility" error={errors.facility?.message} {...register("facility")}>
          <option value="">all of them</option>
          {document.facilities.map(({ key, title }) => (
            <option key={key} value={key}>
              {title}
            </option>
          ))}
        </Choice>
        <Field
          label="Observed from"
          help="UTC. Empty: from the first on."
          autoComplete="off"
          error={errors.from?.message}
          {...register("from")}
        />
        <Field
          label="Observed until"
          help="UTC, included. Empty: to the last."
          autoComplete="off"
          error={errors.to?.message}
          {...register("to")}
        />
      </FieldRow>
      <Field
        label="Reason"
        help="Why they should never have been here."
        autoComplete="off"
        error={errors.reason?.message}
        {...register("reason")}
      />
    </>
  );
}

const SHOWN = 30;

function Taken({ ids }: { ids: readonly string[] }) {
  return (
    <p className="[overflow-wrap:anywhere]">
      {countWords(ids.length)}: {ids.slice(0, SHOWN).join(", ")}
      {ids.length > SHOWN ? ` and ${ids.length - SHOWN} more` : ""}.
    </p>
  );
}

function countWords(count: number): string {
  return count === 1 ? "1 measurement" : `${count} measurements`;
}
