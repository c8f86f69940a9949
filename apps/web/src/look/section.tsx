import type { ReactNode } from "react";

/** One sheet of a page, with its heading; `gloss` is a quiet addition to the heading. */
export function Section(props: {
  title: string;
  gloss?: ReactNode;
  id?: string;
  actions?: ReactNode;
  children: ReactNode;
}) {
  const headingId = `${props.id ?? slug(props.title)}-heading`;
  return (
    <section
      id={props.id}
      aria-labelledby={headingId}
      className="sheet mb-5 min-w-0 scroll-mt-4 rounded-sheet border border-rule bg-sheet p-3.5 sm:px-5 sm:py-4.5"
    >
      <div className="mb-3 flex flex-wrap items-baseline justify-between gap-x-6 gap-y-1">
        <h2 id={headingId}>
          {props.title} {props.gloss ? <span className="gloss ml-1">{props.gloss}</span> : null}
        </h2>
        {props.actions}
      </div>
      {props.children}
    </section>
  );
}

function slug(title: string): string {
  return title.toLowerCase().replaceAll(/[^a-z0-9]+/g, "-");
}
