import type { ReferenceObjection } from "@weighhouse/desk/read-remarks";
import Link from "next/link";
import { AnswerForm } from "@/forms/records/answer-form";
import { Time } from "@/look/time";

/** Objections to a reference, each with the coordinator's answer, or a form for it. */
export function Objections(props: {
  objections: readonly ReferenceObjection[];
  campaign: string;
  teams: ReadonlyMap<string, string | null>;
  answers: boolean;
}) {
  const path = `/campaigns/${props.campaign}/ledger`;
  return (
    <ul className="list-none">
      {props.objections.map(({ seq, at, team, reason, answer }) => (
        <li key={seq} className="mb-4 max-w-[90ch]">
          <p className="text-[13.5px] text-quiet">
            {team === null ? null : `${props.teams.get(team) ?? team}, `}
            <Time at={at} />,{" "}
            <Link className="link" href={`${path}/${seq}`}>
              entry {seq}
            </Link>
          </p>
          <p className="whitespace-pre-line [overflow-wrap:anywhere]">{reason}</p>
          {answer === null ? (
            props.answers ? (
              <div className="mt-2">
                <AnswerForm campaign={props.campaign} on={seq} />
              </div>
            ) : (
              <p className="text-[13.5px] text-quiet">Not answered yet.</p>
            )
          ) : (
            <p className="mt-1 border-l-3 border-rule pl-3 whitespace-pre-line [overflow-wrap:anywhere]">
              <strong className="font-semibold">Answer.</strong> {answer.text}
            </p>
          )}
        </li>
      ))}
    </ul>
  );
}
