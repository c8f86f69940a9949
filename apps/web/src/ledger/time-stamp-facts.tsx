import type { TimeStamps } from "@weighhouse/desk/read-time-stamps";
import { formatCount } from "@weighhouse/figures/numbers";
import Link from "next/link";
import { Notice } from "@/look/notice";
import { Time } from "@/look/time";

const mostMissing = 12;

const reasons: Record<TimeStamps["missing"][number]["because"], string> = {
  registration: "which closed registration",
  citation: "whose standings are cited",
  daily: "the newest, with no time-stamp since a day or more",
};

/** Which signed heads an outside authority has time-stamped, and which it should have and has not. */
export function TimeStampFacts({ path, stamps }: { path: string; stamps: TimeStamps }) {
  const { stamped, missing } = stamps;
  const newest = stamped.at(-1);
  return (
    <>
      {newest === undefined ? (
        <p className="mb-2">
          No head of this ledger is time-stamped. Its times are this server’s own word, and that of
          whoever kept a signed head.
        </p>
      ) : (
        <p className="mb-2">
          {stamped.length === 1 ? "One head is" : `${formatCount(stamped.length)} heads are`}{" "}
          time-stamped, the newest that of {entriesWords(newest.size)}, there before{" "}
          <Time at={newest.at} /> by the word of {newest.authority}.
        </p>
      )}
      {missing.length === 0 ? null : (
        <Notice label={missing.length === 1 ? "One is missing:" : `${missing.length} are missing:`}>
          <ul className="mt-1 list-disc pl-5">
            {missing.slice(0, mostMissing).map(({ size, because }) => (
              <li key={size}>
                the head of{" "}
                <Link className="link" href={`${path}/${size - 1}`}>
                  {entriesWords(size)}
                </Link>
                , {reasons[because]}
              </li>
            ))}
            {missing.length > mostMissing ? (
              <li>and {formatCount(missing.length - mostMissing)} more</li>
            ) : null}
          </ul>
          <p className="text-[14px] text-quiet">
            Where the operator has named an authority it is asked again, for about a week; a
            time-stamp that comes late proves the later time only.
          </p>
        </Notice>
      )}
    </>
  );
}

function entriesWords(size: number): string {
  return size === 1 ? "1 entry" : `${formatCount(size)} entries`;
}
