import { useId } from "react";
import type { ComponentProps, ReactNode } from "react";

const box =
  "w-full rounded-sheet border border-edge bg-sheet px-2.5 py-1.5 text-ink placeholder:text-quiet aria-invalid:border-rust aria-invalid:border-2 disabled:opacity-60";

interface FieldFrame {
  label: string;
  /** Quiet words after the label: the exact term, or the unit. */
  gloss?: string;
  /** Help below the label, before the box. */
  help?: ReactNode;
  /** What is wrong and what is allowed; stands at the field and is read with it. */
  error?: string | undefined;
}

/** A labelled input; react-hook-form's `register(...)` spreads straight into it. */
export function Field({
  label,
  gloss,
  help,
  error,
  className = "",
  ...input
}: FieldFrame & ComponentProps<"input">) {
  const ids = useFieldIds();
  return (
    <Framed {...{ label, gloss, help, error, ids }}>
      <input
        id={ids.control}
        aria-invalid={error ? true : undefined}
        aria-describedby={describedBy(ids, help, error)}
        className={`${box} ${className}`}
        {...input}
      />
    </Framed>
  );
}

export function TextArea({
  label,
  gloss,
  help,
  error,
  className = "",
  ...input
}: FieldFrame & ComponentProps<"textarea">) {
  const ids = useFieldIds();
  return (
    <Framed {...{ label, gloss, help, error, ids }}>
      <textarea
        id={ids.control}
        aria-invalid={error ? true : undefined}
        aria-describedby={describedBy(ids, help, error)}
        className={`${box} min-h-20 ${className}`}
        {...input}
      />
    </Framed>
  );
}

export function Choice({
  label,
  gloss,
  help,
  error,
  className = "",
  children,
  ...input
}: FieldFrame & ComponentProps<"select">) {
  const ids = useFieldIds();
  return (
    <Framed {...{ label, gloss, help, error, ids }}>
      <select
        id={ids.control}
        aria-invalid={error ? true : undefined}
        aria-describedby={describedBy(ids, help, error)}
        className={`${box} ${className}`}
        {...input}
      >
        {children}
      </select>
    </Framed>
  );
}

type FieldIds = { control: string; help: string; error: string };

function useFieldIds(): FieldIds {
  const id = useId();
  return { control: id, help: `${id}-help`, error: `${id}-error` };
}

function describedBy(ids: FieldIds, help: ReactNode, error: string | undefined) {
  return [help ? ids.help : "", error ? ids.error : ""].filter(Boolean).join(" ") || undefined;
}

function Framed(props: FieldFrame & { ids: FieldIds; children: ReactNode }) {
  return (
    <div className="mb-3.5 min-w-0">
      <label htmlFor={props.ids.control} className="mb-1 block font-medium">
        {props.label} {props.gloss ? <span className="gloss">{props.gloss}</span> : null}
      </label>
      {props.help ? (
        <div id={props.ids.help} className="mb-1 text-[13.5px] text-quiet">
          {props.help}
        </div>
      ) : null}
      {props.children}
      {props.error ? (
        <div id={props.ids.error} className="mt-1 text-[13.5px] font-medium text-rust">
          {props.error}
        </div>
      ) : null}
    </div>
  );
}
