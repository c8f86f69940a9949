"use client";

import type { CampaignDocument } from "@weighhouse/campaign/document";
import { useEffect, useMemo } from "react";
import { FormProvider } from "react-hook-form";
import { Button } from "@/look/button";
import { FormBody } from "../form-body";
import { DraftNote } from "../form-frame";
import { formSchema } from "../form-schema";
import { useDraftForm } from "../use-draft-form";
import {
  emptyMeasurement,
  measurementContent,
  measurementDraft,
  measurementSchema,
  type MeasurementDraft,
  type MeasurementOfForm,
} from "./measurement-draft";
import { MeasurementFields } from "./measurement-fields";
import { problemFields } from "./problem-fields";
import { PostedNote, PostingRefused, type Entered } from "./posted-note";
import { PreviewView } from "./preview-view";
import { usePosting, type Posted } from "./use-posting";

const schema = formSchema<MeasurementDraft, MeasurementOfForm>({
  schema: measurementSchema,
  content: measurementContent,
});

/** One measurement by hand. */
export function PostOne({ document }: { document: CampaignDocument }) {
  const { key } = document.campaign;
  const defaults = useMemo(() => emptyMeasurement(document), [document]);
  const { form, draft } = useDraftForm({ name: `post-one:${key}`, defaults, schema });
  const posting = usePosting(key);
  const { previewed, busy } = posting;
  const { setError } = form;

  useEffect(() => {
    const row = previewed?.preview.rows[0];
    if (row === undefined) return;
    for (const { field, message } of problemFields(row))
      setError(field, { type: "server", message });
  }, [previewed, setError]);

  const submit = form.handleSubmit((content) =>
    posting.preview({ from: "drafts", drafts: [measurementDraft(content)] }),
  );
  return (
    <FormProvider {...form}>
      <form
        noValidate
        aria-label="Post one measurement"
        onSubmit={(event) => void submit(event)}
        // What was previewed is no longer what stands in the form.
        onChange={() => (previewed === null ? undefined : posting.forget())}
      >
        <FormBody busy={busy !== null}>
          <DraftNote draft={draft} />
          <PostedNote campaign={key} entered={enteredOf(posting.posted)} />
          <MeasurementFields document={document} />
          <Button kind={previewed ? "plain" : "main"} type="submit" disabled={busy !== null}>
            {busy === "previewing" ? "Looking…" : "Preview"}
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
                {busy === "posting" ? "Posting…" : "Post measurement"}
              </Button>
            ) : null}
          </div>
        </FormBody>
      </form>
    </FormProvider>
  );
}

function enteredOf(posted: Posted | null): Entered | null {
  if (posted === null) return null;
  return {
    posted: posted.posted.length,
    alreadyThere: posted.alreadyThere.length,
    entries: posted.appended,
    leftOut: 0,
  };
}
