"use client";

import { useId, type ComponentProps, type ReactNode } from "react";
import Link from "next/link";
import { usePathname, useSearchParams } from "next/navigation";
import { Button } from "@/look/button";
import { Notice } from "@/look/notice";
import { Time } from "@/look/time";
import type { KeptDraft } from "./use-draft-form";
import type { Failure } from "./use-sending";

/** What a form says of itself above its fields: a restored draft, or a browser that keeps nothing. */
export function DraftNote({ draft }: { draft: KeptDraft }) {
  if (draft.notKept)
    return (
      <output className="block">
        <Notice label="Not kept.">
          This browser does not let the page keep what you type; send it before you leave.
        </Notice>
      </output>
    );
  if (draft.restoredFrom === null) return null;
  return (
    <output className="block">
      <Notice label="Restored.">
        What you had typed on <Time at={draft.restoredFrom} /> is back.{" "}
        <button type="button" className="link cursor-pointer" onClick={draft.startAfresh}>
          Start afresh
        </button>
      </Notice>
    </output>
  );
}

/** Why sending failed, in words, with the way on. */
export function FailureNote({ failure }: { failure: Failure | null }) {
  const search = useSearchParams().toString();
  const path = usePathname() + (search === "" ? "" : `?${search}`);
  if (failure === null) return null;
  return (
    <Notice role="alert" tone="bad" label="Not sent.">
      {failure.signedOut ? (
        <>
          Your session has ended. What you typed is kept:{" "}
          <Link className="link" href={`/sign-in?next=${encodeURIComponent(path)}`}>
            sign in again
          </Link>{" "}
          and it will be here.
        </>
      ) : (
        failure.message
      )}
      {failure.loose.length > 0 ? (
        <ul className="mt-1 list-disc pl-5">
          {failure.loose.map((line) => (
            <li key={line}>{line}</li>
          ))}
        </ul>
      ) : null}
    </Notice>
  );
}

/** The button that sends, and what stands beside it. */
export function SendRow(props: { sending: boolean; label: string; children?: ReactNode }) {
  return (
    <div className="mt-2 flex flex-wrap items-center gap-3">
      <Button kind="main" type="submit" disabled={props.sending} aria-busy={props.sending}>
        {props.sending ? "Sending…" : props.label}
      </Button>
      {props.children}
    </div>
  );
}

/** A box to tick with its label beside it and its help below. */
export function Tick({
  label,
  help,
  ...input
}: { label: string; help?: ReactNode } & ComponentProps<"input">) {
  const id = useId();
  return (
    <div className="mb-3.5 grid grid-cols-[auto_1fr] items-start gap-x-2.5">
      <input
        type="checkbox"
        id={id}
        aria-describedby={help ? `${id}-help` : undefined}
        className="mt-1 size-4 accent-brass"
        {...input}
      />
      <label htmlFor={id} className="font-medium">
        {label}
      </label>
      {help ? (
        <div id={`${id}-help`} className="col-start-2 text-[13.5px] text-quiet">
          {help}
        </div>
      ) : null}
    </div>
  );
}

/**
 * Fields side by side where there is room, one below the other where there is none. Labels, help,
 * boxes and errors of one row share four lines (a subgrid), so that boxes stay level.
 */
export function FieldRow({ children }: { children: ReactNode }) {
  return <div className={fieldRow}>{children}</div>;
}

const fieldRow = [
  "grid gap-x-5 sm:grid-cols-[repeat(auto-fit,minmax(200px,1fr))]",
  "sm:*:row-span-4 sm:*:grid sm:*:grid-rows-subgrid",
  "sm:[&>div>label]:row-start-1 sm:[&>div>[id$='-help']]:row-start-2",
  "sm:[&>div>:is(input,select,textarea,button)]:row-start-3 sm:[&>div>[id$='-error']]:row-start-4",
].join(" ");

/** A button in a row of fields, level with their boxes. */
export function FieldRowButton(props: ComponentProps<typeof Button>) {
  return (
    <div className="mb-3.5">
      <Button {...props} />
    </div>
  );
}
