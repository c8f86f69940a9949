import { formatCount } from "@weighhouse/figures/numbers";
import { Notice } from "@/look/notice";
import { sizeWords } from "../../audit/check-protocol";
import { problemWords } from "../../form-schema";
import type { OpenedTable } from "./protocol";

const formats: Record<OpenedTable["format"], string> = {
  csv: "CSV",
  ecsv: "ECSV",
  votable: "VOTable",
  ndjson: "NDJSON",
  document: "campaign document",
};

/** What was read: the file in a line, what was taken for what, and what is wrong with it. */
export function TableFacts(props: { opened: OpenedTable; notes: readonly string[] }) {
  const { opened } = props;
  const notes = [...new Set([...opened.notes, ...props.notes])];
  const facts = [
    formats[opened.format],
    `${formatCount(opened.rows)} ${opened.rows === 1 ? "row" : "rows"}`,
    opened.columns.length > 0 ? `${opened.columns.length} columns` : "",
    sizeWords(opened.bytes),
  ].filter((fact) => fact !== "");
  return (
    <div className="mb-3">
      <p className="mb-1">
        <strong className="font-semibold [overflow-wrap:anywhere]">{opened.name}</strong>{" "}
        <span className="text-quiet">{facts.join(" · ")}</span>
      </p>
      {notes.length > 0 ? (
        <ul className="mb-2 list-disc pl-5 text-[14px] text-quiet">
          {notes.map((note) => (
            <li key={note}>{note}</li>
          ))}
        </ul>
      ) : null}
    </div>
  );
}

const mostProblems = 20;

/** What is wrong with a table as a whole, with its place where there is one. */
export function TableProblems(props: {
  problems: readonly {
    line?: number | null;
    column?: string | null;
    found: string;
    allowed: string;
  }[];
}) {
  const { problems } = props;
  if (problems.length === 0) return null;
  return (
    <Notice role="alert" tone="bad" label="The table can’t be used so.">
      <ul className="mt-1 list-disc pl-5">
        {problems.slice(0, mostProblems).map((problem, index) => (
          <li key={index}>
            {placeWords(problem)}
            {problemWords(problem)}
          </li>
        ))}
      </ul>
      {problems.length > mostProblems ? (
        <p>And {formatCount(problems.length - mostProblems)} more.</p>
      ) : null}
    </Notice>
  );
}

function placeWords({ line, column }: { line?: number | null; column?: string | null }): string {
  const words = [line ? `line ${line}` : "", column ? `column ${column}` : ""].filter(
    (word) => word !== "",
  );
  const place = words.join(", ");
  return place === "" ? "" : `${place.charAt(0).toUpperCase()}${place.slice(1)}: `;
}
