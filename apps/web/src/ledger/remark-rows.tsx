import type { Remark } from "@weighhouse/desk/read-remarks";
import Link from "next/link";
import { Time } from "@/look/time";

const words = { question: "Question", objection: "Objection", answer: "Answer" } as const;

/** What was said of something, oldest first. */
export function RemarkRows({ remarks, path }: { remarks: readonly Remark[]; path: string }) {
  return (
    <ul className="list-none">
      {remarks.map((remark) => (
        <li key={remark.seq} className="mb-3 max-w-[90ch]">
          <p className="text-[13.5px] text-quiet">
            <strong className="font-semibold text-ink">{words[remark.kind]}</strong>
            {remark.team ? `, ${remark.team}` : ""}, <Time at={remark.at} />,{" "}
            <Link className="link" href={`${path}/${remark.seq}`}>
              entry {remark.seq}
            </Link>
          </p>
          <p className="whitespace-pre-line [overflow-wrap:anywhere]">{remark.text}</p>
        </li>
      ))}
    </ul>
  );
}
