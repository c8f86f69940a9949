"use client";

import type { AppRouter } from "@weighhouse/api/router";
import type { inferRouterOutputs } from "@trpc/server";
import { useRouter } from "next/navigation";
import { useState } from "react";
import { z } from "zod";
import { Button } from "@/look/button";
import { Choice, Field, TextArea } from "@/look/field";
import { useTRPCClient } from "@/trpc/client";
import { FormBody } from "../form-body";
import { DraftNote, FailureNote, FieldRow } from "../form-frame";
import { problemWords } from "../form-schema";
import { refusalOf, type Refusal } from "../refusal";
import { TextFileField } from "../text-file-field";
import { useDraftForm } from "../use-draft-form";
import { ImportPreviewView } from "./import-preview-view";

type ImportPreview = inferRouterOutputs<AppRouter>["campaigns"]["previewImport"];
type Visibility = "public" | "members";

const empty = { text: "", key: "", visibility: "public" as Visibility };
const schema = z.object({
  text: z.string().regex(/\S/, { error: "Empty: choose a file or paste a campaign document." }),
  key: z.string().regex(/^$|^[a-z0-9][a-z0-9-]{0,63}$/, {
    error: "A key: 1 to 64 of a-z, 0-9 and -, starting with a letter or digit.",
  }),
  visibility: z.enum(["public", "members"]),
});

/** A campaign document becomes a campaign here: first what would be made, then all of it. */
export function ImportForm() {
  const client = useTRPCClient();
  const router = useRouter();
  const { form, draft } = useDraftForm({ name: "import", defaults: empty, schema });
  const [preview, setPreview] = useState<ImportPreview | null>(null);
  const [refusal, setRefusal] = useState<Refusal | null>(null);
  const [busy, setBusy] = useState<"previewing" | "importing" | null>(null);
  const { register, formState, setValue } = form;
  const forget = () => {
    setPreview(null);
    setRefusal(null);
  };
  const inputOf = ({ text, key, visibility }: z.output<typeof schema>) => ({
    text,
    visibility,
    ...(key === "" ? {} : { key }),
  });
  const run = (what: "previewing" | "importing") =>
    form.handleSubmit(async (values) => {
      setBusy(what);
      setRefusal(null);
      try {
        if (what === "previewing") {
          setPreview(await client.campaigns.previewImport.mutate(inputOf(values)));
        } else {
          const { key } = await client.campaigns.import.mutate(inputOf(values));
          draft.sent();
          router.push(`/campaigns/${key}`);
          router.refresh();
        }
      } catch (error) {
        setRefusal(refusalOf(error));
      } finally {
        setBusy(null);
      }
    });
  const changed = { onChange: forget };
  const plan = preview?.plan ?? null;
  const ready = plan !== null && !plan.taken;
  return (
    <form
      noValidate
      aria-label="Import a campaign document"
      onSubmit={(event) => void run("previewing")(event)}
    >
      <FormBody busy={busy !== null}>
        <DraftNote draft={draft} />
        <TextFileField
          label="Campaign document"
          accept=".json,application/json"
          help="A JSON file in the format weighhouse-campaign/1. Its text appears below."
          onText={(read) => {
            forget();
            setValue("text", read, { shouldDirty: true, shouldValidate: true });
          }}
        />
        <TextArea
          label="Document as text"
          help="Or paste it."
          rows={10}
          spellCheck={false}
          wrap="off"
          className="font-mono text-[13px]"
          error={formState.errors.text?.message}
          {...register("text", changed)}
        />
        <FieldRow>
          <Field
            label="Key here"
            help="Empty: the document’s own key."
            autoComplete="off"
            error={
              formState.errors.key?.message ??
              (plan?.taken
                ? `A campaign here has the key ${plan.key} already; choose another.`
                : undefined)
            }
            {...register("key", changed)}
          />
          <Choice
            label="Seen by"
            help="Who may read the standings and the ledger."
            {...register("visibility", changed)}
          >
            <option value="public">everybody</option>
            <option value="members">members only</option>
          </Choice>
        </FieldRow>
        <Button kind={ready ? "plain" : "main"} type="submit" disabled={busy !== null}>
          {busy === "previewing" ? "Reading the document…" : "Preview import"}
        </Button>
        {preview === null ? null : (
          <ImportPreviewView preview={preview} text={form.getValues("text")} />
        )}
        <div className="mt-3">
          <FailureNote
            failure={
              refusal === null
                ? null
                : {
                    message: refusal.message,
                    signedOut: refusal.signedOut,
                    loose: refusal.problems.map(
                      (problem) => `${problem.pointer}: ${problemWords(problem)}`,
                    ),
                  }
            }
          />
          {ready ? (
            <Button kind="main" disabled={busy !== null} onClick={() => void run("importing")()}>
              {busy === "importing" ? "Importing…" : "Import campaign"}
            </Button>
          ) : null}
        </div>
      </FormBody>
    </form>
  );
}
