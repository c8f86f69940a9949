"use client";

import type { CampaignDocument } from "@weighhouse/campaign/document";
import { useState } from "react";
import { FailureNote } from "../../form-frame";
import { refusalOf } from "../../refusal";
import type { Refusal } from "../../refusal";
import type { MatchedTable } from "./protocol";

/** For whom the match is remembered, or will be; and the way to forget it. */
export function RememberedNote(props: {
  document: CampaignDocument;
  matched: MatchedTable;
  onForget: (facility: string) => Promise<void>;
}) {
  const { document, matched, onForget } = props;
  const [refusal, setRefusal] = useState<Refusal | null>(null);
  const [forgetting, setForgetting] = useState(false);
  const title = (key: string) => document.facilities.find((each) => each.key === key)?.title ?? key;
  const { rememberedFor, facility } = matched;
  if (rememberedFor === null) {
    return (
      <p className="mb-2 text-[14px] text-quiet">
        {facility === null
          ? "What you correct here is remembered once the table is of one facility: choose it below."
          : `What you correct here is remembered for tables of ${title(facility)} with these columns, once this one is posted.`}
      </p>
    );
  }
  const forget = async () => {
    setForgetting(true);
    try {
      await onForget(rememberedFor);
      setRefusal(null);
    } catch (error) {
      setRefusal(refusalOf(error));
    } finally {
      setForgetting(false);
    }
  };
  return (
    <>
      <p className="mb-2 text-[14px]">
        Read as the last table of {title(rememberedFor)} with these columns.{" "}
        <button
          type="button"
          className="link cursor-pointer"
          disabled={forgetting}
          onClick={() => void forget()}
        >
          Forget that
        </button>
      </p>
      <FailureNote
        failure={refusal && { message: refusal.message, signedOut: refusal.signedOut, loose: [] }}
      />
    </>
  );
}
