"use client";

import { useCallback, useState } from "react";
import type { UseFormRegisterReturn } from "react-hook-form";
import { Button } from "@/look/button";
import { Field, TextArea } from "@/look/field";
import { useDroppedFile } from "./use-dropped-file";

/** More text than this is read as it is pasted: a field would hold the page still with it. */
const mostTyped = 200_000;
const pastedName = "pasted rows";
const accepted =
  ".csv,.tsv,.txt,.dat,.ecsv,.vot,.votable,.xml,.ndjson,.jsonl,.json,text/csv,text/plain,application/json,application/x-ndjson,application/x-votable+xml";

/** Where a table comes in: dropped, chosen or pasted. */
export function ChooseTable(props: {
  /** What is open already is said by its name. */
  open: string | null;
  text: UseFormRegisterReturn;
  pasted: () => string;
  onTable: (file: Blob, name: string) => void;
}) {
  const { open, text, pasted, onTable } = props;
  const [empty, setEmpty] = useState(false);
  const over = useDroppedFile(useCallback((file: File) => onTable(file, file.name), [onTable]));
  return (
    <div
      className={`mb-4 rounded-sheet border border-dashed px-4 pt-3.5 pb-1 ${over ? "border-brass bg-well" : "border-edge"}`}
    >
      <Field
        label={open === null ? "Table" : "Another table"}
        gloss="drop it on this page, or choose it"
        help="CSV, ECSV, VOTable, NDJSON or a campaign document in JSON. It is read here in the browser; nothing is entered before you have seen what becomes of each row."
        type="file"
        accept={accepted}
        className="cursor-pointer"
        onClick={(event) => {
          event.currentTarget.value = "";
        }}
        onChange={(event) => {
          const file = event.target.files?.[0];
          if (file !== undefined) onTable(file, file.name);
        }}
      />
      <details className="mb-2.5" open={(open === null && pasted() !== "") || undefined}>
        <summary className="cursor-pointer text-[14.5px]">Or paste rows</summary>
        <div className="mt-2">
          <TextArea
            label="Rows"
            help="With the header line first."
            rows={7}
            spellCheck={false}
            wrap="off"
            className="font-mono text-[13px]"
            error={empty ? "Empty: paste rows with a header line, or choose a file." : undefined}
            onPaste={(event) => {
              const pastedText = event.clipboardData.getData("text/plain");
              if (pastedText.length <= mostTyped) return;
              event.preventDefault();
              onTable(new Blob([pastedText]), pastedName);
            }}
            {...text}
          />
          <div className="mb-2">
            <Button
              onClick={() => {
                const rows = pasted();
                setEmpty(rows.trim() === "");
                if (rows.trim() !== "") onTable(new Blob([rows]), pastedName);
              }}
            >
              Read these rows
            </Button>
          </div>
        </div>
      </details>
    </div>
  );
}
