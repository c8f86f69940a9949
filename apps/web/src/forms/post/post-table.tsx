"use client";

import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { TableChoices } from "@weighhouse/tables/table-match";
import { useState } from "react";
import { FormProvider, useWatch } from "react-hook-form";
import { Button } from "@/look/button";
import { FormBody } from "../form-body";
import { DraftNote } from "../form-frame";
import { useDraftForm } from "../use-draft-form";
import { postLabel } from "./fates";
import { PostedNote, PostingRefused } from "./posted-note";
import { noChoices } from "./table/choices";
import { ChooseTable } from "./table/choose-table";
import { ColumnRows } from "./table/column-rows";
import { CorrectConflicts } from "./table/correct-conflicts";
import { FateRows } from "./table/fate-rows";
import { LeaveOut } from "./table/leave-out";
import { ProgressNote } from "./table/progress-note";
import { RememberedNote } from "./table/remembered-note";
import { emptyTable, tableSchema } from "./table/table-draft";
import { TableFacts, TableProblems } from "./table/table-facts";
import { TablePreview } from "./table/table-preview";
import { useKeptTable } from "./table/use-kept-table";
import { useMatching } from "./table/use-matching";
import { useTable } from "./table/use-table";
import { WholeTableFields } from "./table/whole-table-fields";

/** Many measurements from a file or pasted rows: read here, matched, previewed, then entered. */
export function PostTable({ document }: { document: CampaignDocument }) {
  const { key } = document.campaign;
  const { form, draft: typed } = useDraftForm({
    name: `post-table:${key}`,
    defaults: emptyTable,
    schema: tableSchema,
  });
  const table = useTable(document);
  const { opened, matched, previewed, busy, open } = table;
  const [columns, setColumns] = useState<TableChoices>(noChoices);
  const [leaveOut, setLeaveOut] = useState(false);
  const { bring, kept } = useKeptTable({ campaign: key, choices: columns, open, setColumns });
  const values = useWatch({ control: form.control });
  const settle = useMatching({ table, columns, values: { ...emptyTable, ...values } });

  const startAfresh = () => {
    table.close();
    kept.drop();
    setColumns(noChoices);
    typed.startAfresh();
  };
  const draft = {
    restoredFrom: kept.restoredFrom ?? typed.restoredFrom,
    notKept: kept.notKept || typed.notKept,
    startAfresh,
    sent: () => {
      kept.drop();
      setColumns(noChoices);
      typed.sent();
    },
  };
  const preview = form.handleSubmit(async () => {
    // Whoever was quicker than the matching sees what stands there now.
    await settle();
    setLeaveOut(false);
    await table.preview(false);
  });
  const counts = previewed?.counts ?? matched?.counts ?? null;
  const rows = counts === null ? null : Object.values(counts).reduce((sum, each) => sum + each, 0);
  const usable =
    matched !== null &&
    matched.problems.length === 0 &&
    matched.matches.every(({ problem }) => problem === null);
  return (
    <FormProvider {...form}>
      <form noValidate aria-label="Post a table" onSubmit={(event) => void preview(event)}>
        <FormBody busy={busy === "posting"}>
          <DraftNote draft={draft} />
          <PostedNote campaign={key} entered={table.posted} />
          <ChooseTable
            open={opened?.name ?? null}
            text={form.register("text")}
            pasted={() => form.getValues("text")}
            onTable={bring}
          />
          {opened === null ? null : (
            <section aria-label="What was read">
              <TableFacts opened={opened} notes={matched?.notes ?? []} />
              <TableProblems problems={[...opened.problems, ...(matched?.problems ?? [])]} />
              {matched === null || matched.matches.length === 0 ? null : (
                <>
                  <h3 className="mt-4 mb-1.5">Columns</h3>
                  <RememberedNote
                    document={document}
                    matched={matched}
                    onForget={table.forgetRemembered}
                  />
                  <ColumnRows
                    document={document}
                    columns={opened.columns}
                    matched={matched}
                    choices={columns}
                    onChoose={setColumns}
                  />
                </>
              )}
              <h3 className="mt-5 mb-2">
                For all rows <span className="gloss">that don’t say it themselves</span>
              </h3>
              <WholeTableFields document={document} csv={opened.format === "csv"} />
            </section>
          )}
        </FormBody>
        <div className="flex min-h-9 flex-wrap items-center gap-x-5 gap-y-2">
          {opened === null ? null : (
            <Button
              kind={previewed?.postable ? "plain" : "main"}
              type="submit"
              disabled={busy !== null || !usable || rows === 0}
            >
              {previewed === null ? "Preview" : "Preview again"}
            </Button>
          )}
          <ProgressNote
            busy={busy}
            progress={table.progress}
            rows={rows}
            onStop={() => void table.stop()}
          />
        </div>
        <FormBody busy={busy === "posting"}>
          {previewed === null ? null : <TablePreview document={document} previewed={previewed} />}
          {previewed === null ? null : (
            <LeaveOut
              previewed={previewed}
              checked={leaveOut}
              onChange={(out) => {
                setLeaveOut(out);
                void table.preview(out);
              }}
            />
          )}
          {previewed === null || previewed.counts.conflict === 0 ? null : (
            <CorrectConflicts
              document={document}
              count={previewed.counts.conflict}
              drafts={() => table.worker.current!.call("conflicts", null)}
              onCorrected={() => void table.preview(leaveOut)}
            />
          )}
          <PostingRefused refusal={table.refusal} />
          {previewed?.postable ? (
            <Button
              kind="main"
              disabled={busy !== null}
              onClick={() => void table.post(draft.sent)}
            >
              {postLabel(previewed.counts.new)}
            </Button>
          ) : null}
        </FormBody>
        {counts === null || rows === 0 ? null : (
          <FateRows
            document={document}
            counts={counts}
            worker={table.worker}
            version={table.version}
          />
        )}
      </form>
    </FormProvider>
  );
}
