import type { Proposal } from "@weighhouse/desk/read-remarks";
import Link from "next/link";
import { AnswerForm } from "@/forms/records/answer-form";
import { KeptLink } from "@/look/kept-link";
import { Time } from "@/look/time";

/** Quantities that teams proposed: declared, answered, or waiting for the coordinator. */
export function Proposals(props: {
  proposals: readonly Proposal[];
  campaign: string;
  teams: ReadonlyMap<string, string | null>;
  answers: boolean;
}) {
  const base = `/campaigns/${props.campaign}`;
  return (
    <ul className="list-none">
      {props.proposals.map(({ seq, at, team, measurand, reason, state, answer }) => (
        <li key={seq} className="mb-4 max-w-[90ch]">
          <p>
            <strong className="font-serif text-[16px] font-semibold">{measurand.title}</strong>{" "}
            <code className="text-quiet">{measurand.key}</code>
          </p>
          <p className="text-[13.5px] text-quiet">
            {team === null ? null : `${props.teams.get(team) ?? team}, `}
            <Time at={at} />,{" "}
            <Link className="link" href={`${base}/ledger/${seq}`}>
              entry {seq}
            </Link>
          </p>
          <p className="whitespace-pre-line [overflow-wrap:anywhere]">{reason}</p>
          {state === "declared" ? (
            <p className="text-[13.5px]">
              Declared:{" "}
              <KeptLink className="link" href={`${base}/quantities/${measurand.key}`}>
                {measurand.title}
              </KeptLink>
            </p>
          ) : answer !== null ? (
            <p className="mt-1 border-l-3 border-rule pl-3 whitespace-pre-line [overflow-wrap:anywhere]">
              <strong className="font-semibold">Answer.</strong> {answer.text}
            </p>
          ) : props.answers ? (
            <div className="mt-2">
              <p className="mb-2 text-[13.5px] text-quiet">
                Declare it under{" "}
                <Link className="link" href={`${base}/declare/quantities`}>
                  Quantities
                </Link>{" "}
                with the same key, or say why not:
              </p>
              <AnswerForm campaign={props.campaign} on={seq} />
            </div>
          ) : (
            <p className="text-[13.5px] text-quiet">Waits for the coordinator.</p>
          )}
        </li>
      ))}
    </ul>
  );
}
