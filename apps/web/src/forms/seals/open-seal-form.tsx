"use client";

import { problemLine } from "@weighhouse/campaign/problem";
import { readSealedFile, type SealedFile } from "@weighhouse/campaign/sealed-file";
import { useRouter } from "next/navigation";
import { useState } from "react";
import { Button } from "@/look/button";
import { Notice } from "@/look/notice";
import { useTRPCClient } from "@/trpc/client";
import { FormBody } from "../form-body";
import { refusalOf } from "../refusal";
import { TextFileField } from "../text-file-field";

/** Opens a kept seal with its file, which is read here first: a changed one is not even sent. */
export function OpenSealForm({ campaign }: { campaign: string }) {
  const client = useTRPCClient();
  const router = useRouter();
  const [file, setFile] = useState<SealedFile | null>(null);
  const [lines, setLines] = useState<string[]>([]);
  const [busy, setBusy] = useState(false);
  const [opened, setOpened] = useState<string | null>(null);

  const read = (text: string) => {
    setOpened(null);
    const found = readSealedFile(text);
    const other = found.ok && found.value.campaign !== campaign;
    setFile(found.ok && !other ? found.value : null);
    if (!found.ok) setLines(found.problems.map(problemLine));
    else setLines(other ? [`It is a seal of the campaign ${found.value.campaign}.`] : []);
  };
  const open = async ({ digest, nonce, content }: SealedFile) => {
    setBusy(true);
    setLines([]);
    try {
      await client.seals.open.mutate({ key: campaign, digest, nonce, content });
      setFile(null);
      setOpened(digest);
      router.refresh();
    } catch (error) {
      setLines(refusalOf(error).message.split("\n"));
    } finally {
      setBusy(false);
    }
  };
  return (
    <FormBody busy={busy}>
      <TextFileField
        label="The file that you kept"
        help="Written by weighhouse seal or saved by this page; its name ends in .sealed.json."
        accept=".json,application/json"
        onText={read}
      />
      {lines.length > 0 ? (
        <Notice role="alert" tone="bad" label="Not opened.">
          <ul className="list-none">
            {lines.map((line) => (
              <li key={line} className="[overflow-wrap:anywhere]">
                {line}
              </li>
            ))}
          </ul>
        </Notice>
      ) : null}
      {file === null ? null : (
        <>
          <p className="mb-1">
            Sealed {file.hypothesis === null ? "measurement" : `prediction of ${file.hypothesis}`}{" "}
            on {file.measurand}. Once opened, everyone reads this:
          </p>
          <pre className="mb-3 max-w-full whitespace-pre-wrap text-[13px]">
            <code>{JSON.stringify(file.content, null, 2)}</code>
          </pre>
          <Button kind="main" onClick={() => void open(file)}>
            Open this seal
          </Button>
        </>
      )}
      <output className="mt-2 block">
        {opened === null ? null : (
          <Notice tone="good">The seal {opened.slice(0, 8)} is open.</Notice>
        )}
      </output>
    </FormBody>
  );
}
