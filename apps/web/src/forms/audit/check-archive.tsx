"use client";

import { useEffect, useRef, useState } from "react";
import { Button } from "@/look/button";
import { Field, TextArea } from "@/look/field";
import { Notice } from "@/look/notice";
import { FormBody } from "../form-body";
import { FieldRow } from "../form-frame";
import { textOrNull } from "../entered-text";
import { mostBytes, sizeWords, type CheckAnswer, type CheckRequest } from "./check-protocol";
import { ReportView } from "./report-view";

type State =
  | { at: "idle" }
  | { at: "checking"; name: string }
  | { at: "done"; name: string; answer: CheckAnswer };

/** Checks any archive here in the browser, in a worker; nothing is uploaded. */
export function CheckArchive() {
  const [file, setFile] = useState<File | null>(null);
  const [trustedKey, setTrustedKey] = useState("");
  const [trustedHead, setTrustedHead] = useState("");
  const [state, setState] = useState<State>({ at: "idle" });
  const worker = useRef<Worker | null>(null);
  useEffect(() => () => worker.current?.terminate(), []);

  const stop = () => {
    worker.current?.terminate();
    worker.current = null;
    setState({ at: "idle" });
  };

  const check = async (chosen: File) => {
    stop();
    setState({ at: "checking", name: chosen.name });
    const bytes = await chosen.arrayBuffer();
    const done = (answer: CheckAnswer) => {
      worker.current?.terminate();
      worker.current = null;
      setState({ at: "done", name: chosen.name, answer });
    };
    const made = new Worker(new URL("./check-archive.worker.ts", import.meta.url), {
      type: "module",
    });
    worker.current = made;
    made.addEventListener("message", (event: MessageEvent<CheckAnswer>) => done(event.data));
    made.addEventListener("error", (event) =>
      done({ report: null, failure: event.message || "The check could not be started here." }),
    );
    const request: CheckRequest = {
      bytes,
      trustedKey: textOrNull(trustedKey),
      trustedHead: trustedHead.trim() === "" ? null : trustedHead,
    };
    made.postMessage(request, [bytes]);
  };

  const tooLarge = file !== null && file.size > mostBytes;
  return (
    <form
      aria-label="Check an archive"
      onSubmit={(event) => {
        event.preventDefault();
        if (file !== null && !tooLarge) void check(file);
      }}
    >
      <FormBody>
        <Field
          label="Archive to check"
          type="file"
          accept=".zip,application/zip"
          help="An audit trail from here or from anywhere. It stays on this machine."
          error={
            tooLarge
              ? `Found ${sizeWords(file.size)}: allowed are ${sizeWords(mostBytes)}; use the command line for larger ones.`
              : undefined
          }
          onChange={(event) => {
            setFile(event.target.files?.[0] ?? null);
            stop();
          }}
        />
        <details className="mb-3">
          <summary className="cursor-pointer text-[14.5px]">What you already trust</summary>
          <div className="mt-2">
            <p className="mb-2 text-[13.5px] text-quiet">
              A forger can sign anew with a key of their own. A key or a signed head that you kept
              from before closes that door.
            </p>
            <FieldRow>
              <TextArea
                label="Public key you hold"
                rows={2}
                spellCheck={false}
                className="font-mono text-[13px]"
                value={trustedKey}
                onChange={(event) => setTrustedKey(event.target.value)}
              />
              <TextArea
                label="Signed head you kept"
                rows={2}
                spellCheck={false}
                className="font-mono text-[13px]"
                value={trustedHead}
                onChange={(event) => setTrustedHead(event.target.value)}
              />
            </FieldRow>
          </div>
        </details>
        <div className="flex flex-wrap gap-3">
          <Button
            kind="main"
            type="submit"
            disabled={file === null || tooLarge || state.at === "checking"}
          >
            {state.at === "checking" ? "Checking…" : "Check archive"}
          </Button>
          {state.at === "checking" ? <Button onClick={stop}>Stop</Button> : null}
        </div>
        <output className="mt-3 block">
          {state.at === "checking" ? `Checking ${state.name}; you can go on reading.` : null}
          {state.at === "done" && state.answer.report !== null ? (
            <ReportView name={state.name} report={state.answer.report} />
          ) : null}
        </output>
        {state.at === "done" && state.answer.failure !== null ? (
          <Notice role="alert" tone="bad" label="Not checked.">
            {state.answer.failure}
          </Notice>
        ) : null}
      </FormBody>
    </form>
  );
}
