import type { ReactNode } from "react";

const tones = {
  plain: "border-brass",
  good: "border-fir",
  bad: "border-rust",
} as const;

/** A remark with a coloured edge and, where it matters, a word in front that says what it is. */
export function Notice(props: {
  tone?: keyof typeof tones;
  label?: string;
  role?: "alert";
  children: ReactNode;
}) {
  return (
    <div
      role={props.role}
      className={`mb-2 max-w-[90ch] border-l-3 py-0.5 pl-3 ${tones[props.tone ?? "plain"]}`}
    >
      {props.label ? <strong className="mr-1.5 font-semibold">{props.label}</strong> : null}
      {props.children}
    </div>
  );
}

/** What an empty page says: why it is empty and what to do first. */
export function Empty(props: { title: string; children: ReactNode }) {
  return (
    <div className="max-w-[66ch] py-2">
      <p className="mb-1 font-serif text-[17px] font-semibold">{props.title}</p>
      <div className="text-quiet">{props.children}</div>
    </div>
  );
}
