"use client";

import type { CampaignDocument } from "@weighhouse/campaign/document";
import { useMemo } from "react";
import { useWatch } from "react-hook-form";
import { z } from "zod";
import { Button } from "@/look/button";
import { Choice, TextArea } from "@/look/field";
import { FormBody } from "../form-body";
import { DraftNote, FieldRow } from "../form-frame";
import { TextFileField } from "../text-file-field";
import { useDraftForm } from "../use-draft-form";
import { postLabel } from "./fates";
import { PostedNote, PostingRefused } from "./posted-note";
import { PreviewView } from "./preview-view";
import { usePosting } from "./use-posting";

const empty = { text: "", measurand: "", facility: "" };

const tableSchema = z.object({
  text: z.string().regex(/\S/, { error: "Empty: choose a file or paste rows with a header line." }),
  measurand: z.string(),
  facility: z.string(),
});

/** Many measurements from a CSV file or pasted rows. */
export function PostTable({ document }: { document: CampaignDocument }) {
  const { key } = document.campaign;
  const { form, draft } = useDraftForm({
    name: `post-table:${key}`,
    defaults: empty,
    schema: tableSchema,
  });
  const posting = usePosting(key);
  const { register, formState, setValue, control } = form;
  const text = useWatch({ control, name: "text" });
  const lines = useMemo(
    () => text.split(/\r?\n/).filter((line) => line.trim() !== "").length,
    [text],
  );
  const submit = form.handleSubmit((values) =>
    posting.preview({
      from: "csv",
      text: values.text,
      defaults: { measurand: values.measurand || null, facility: values.facility || null },
    }),
  );
  const changed = { onChange: posting.forget };
  const { previewed, busy } = posting;
  return (
    <form noValidate aria-label="Post a table" onSubmit={(event) => void submit(event)}>
      <FormBody busy={busy !== null}>
        <DraftNote draft={draft} />
        <PostedNote campaign={key} posted={posting.posted} />
        <ColumnHelp document={document} />
        <TextFileField
          // A file that was posted is done with.
          key={posting.posted?.appended?.from ?? "next"}
          label="CSV file"
          accept=".csv,text/csv,text/plain"
          help="Read here in the browser; its rows appear below."
          onText={(read) => {
            posting.forget();
            setValue("text", read, { shouldDirty: true, shouldValidate: true });
          }}
        />
        <TextArea
          label="Rows"
          gloss={lines > 1 ? `${lines - 1} below the header` : undefined}
          help="Or paste them, with the header line first."
          rows={8}
          spellCheck={false}
          wrap="off"
          className="font-mono text-[13px]"
          error={formState.errors.text?.message}
          {...register("text", changed)}
        />
        <FieldRow>
          <Choice label="Quantity of rows that name none" {...register("measurand", changed)}>
            <option value="">every row names its own</option>
            {document.measurands.map((measurand) => (
              <option key={measurand.key} value={measurand.key}>
                {measurand.title}
              </option>
            ))}
          </Choice>
          <Choice label="Facility of rows that name none" {...register("facility", changed)}>
            <option value="">every row names its own</option>
            {document.facilities.map((facility) => (
              <option key={facility.key} value={facility.key}>
                {facility.title}
              </option>
            ))}
          </Choice>
        </FieldRow>
        <Button kind={previewed ? "plain" : "main"} type="submit" disabled={busy !== null}>
          {busy === "previewing" ? "Reading the rows…" : "Preview rows"}
        </Button>
        {previewed === null ? null : (
          <PreviewView document={document} preview={previewed.preview} />
        )}
        <div className="mt-3">
          <PostingRefused refusal={posting.refusal} />
          {previewed?.preview.postable ? (
            <Button
              kind="main"
              disabled={busy !== null}
              onClick={() => void posting.post(draft.sent)}
            >
              {busy === "posting" ? "Posting…" : postLabel(previewed.preview.counts.new)}
            </Button>
          ) : null}
        </div>
      </FormBody>
    </form>
  );
}

function ColumnHelp({ document }: { document: CampaignDocument }) {
  const keys = (parts: readonly { key: string }[]) => parts.map(({ key }) => key).join(", ");
  return (
    <details className="mb-3 text-[14px]">
      <summary className="cursor-pointer">Which columns, and which keys</summary>
      <div className="mt-2 max-w-[90ch] text-quiet">
        <p>
          The first line names the columns. Needed: <code>value</code>, <code>sd</code>, and{" "}
          <code>measurand</code> unless you choose one below. Also read: <code>id</code>,{" "}
          <code>facility</code>, <code>batch</code>, <code>observedAt</code> (UTC),{" "}
          <code>unit</code>, <code>status</code>, <code>source</code>, <code>sameData</code>,{" "}
          <code>shared</code> (such as <code>zero-point:1; flux:0.5</code>). Other columns are kept
          beside the measurement.
        </p>
        <p className="mt-1">Quantities: {keys(document.measurands) || "none declared yet"}.</p>
        <p>Facilities: {keys(document.facilities) || "none declared yet"}.</p>
        {document.sharedErrors.length > 0 ? (
          <p>Shared errors: {keys(document.sharedErrors)}.</p>
        ) : null}
      </div>
    </details>
  );
}
