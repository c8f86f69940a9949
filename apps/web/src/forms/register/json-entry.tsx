"use client";

import type { CampaignDocument } from "@weighhouse/campaign/document";
import { useState } from "react";
import { useFormContext } from "react-hook-form";
import { Button } from "@/look/button";
import { TextArea } from "@/look/field";
import { Notice } from "@/look/notice";
import { draftOfHypothesis, type HypothesisDraft } from "./hypothesis-draft";
import { hypothesisFromJson } from "./hypothesis-json";

/** The whole hypothesis pasted as JSON fills the form, which then shows what it commits to. */
export function JsonEntry(props: { document: CampaignDocument; keepKey: string | null }) {
  const { document, keepKey } = props;
  const { reset, getValues } = useFormContext<HypothesisDraft>();
  const [text, setText] = useState("");
  const [lines, setLines] = useState<string[]>([]);
  const [filled, setFilled] = useState(false);
  const fill = () => {
    const read = hypothesisFromJson(text, document);
    setFilled(read.ok);
    if (!read.ok) return setLines(read.lines);
    setLines([]);
    const draft = draftOfHypothesis(document, read.hypothesis);
    reset(
      { ...draft, team: getValues("team"), key: keepKey ?? draft.key },
      { keepDefaultValues: true },
    );
  };
  return (
    <details className="mt-5 border-t border-rule pt-3">
      <summary className="cursor-pointer text-[14.5px]">Paste the whole as JSON instead</summary>
      <div className="mt-3">
        <TextArea
          label="Hypothesis as JSON"
          help="As in a campaign document: key, title, statement, predictions with expected and a normal tolerance or none. It fills the form and replaces what is there; nothing is sent."
          rows={8}
          spellCheck={false}
          className="font-mono text-[13px]"
          value={text}
          onChange={(event) => setText(event.target.value)}
          error={lines.length > 0 ? "The form was left as it is; see below." : undefined}
        />
        {lines.length > 0 ? (
          <Notice role="alert" tone="bad" label="Not read.">
            <ul className="list-disc pl-5">
              {lines.map((line) => (
                <li key={line}>{line}</li>
              ))}
            </ul>
          </Notice>
        ) : null}
        {filled ? (
          <output className="block">
            <Notice tone="good">
              The form now holds what you pasted. Go on to the predictions.
            </Notice>
          </output>
        ) : null}
        <Button onClick={fill} disabled={text.trim() === ""}>
          Fill the form from JSON
        </Button>
      </div>
    </details>
  );
}
