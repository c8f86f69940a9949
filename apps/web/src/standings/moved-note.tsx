"use client";

import { useEffect, useState, useSyncExternalStore } from "react";
import { Time } from "@/look/time";
import { whatMoved } from "./what-moved";
import type { StandingsDigest } from "./what-moved";

/**
 * Says what moved: since this reader's last visit when the page opens, and since the last state
 * that was shown whenever the page moves under their eyes.
 */
export function MovedNote({ campaign, digest }: { campaign: string; digest: StandingsDigest }) {
  const visit = useLastVisit(campaign, digest);
  const moves = useMoves(digest);
  return (
    <>
      <div aria-live="polite" data-moved={moves[0]?.size}>
        {moves.map((move) => (
          <div key={move.size} className="mb-3 border-l-3 border-fir py-0.5 pl-3">
            <p className="text-[13.5px] text-quiet">
              Just now, entry {move.size - 1}, <Time at={move.at} />
            </p>
            <Lines lines={move.lines} />
          </div>
        ))}
      </div>
      {visit ? (
        <div className="mb-2 border-l-3 border-brass py-0.5 pl-3">
          <p className="text-[13.5px] text-quiet">
            Since you were here, when the last entry was of <Time at={visit.since} />
          </p>
          {visit.lines.length > 0 ? (
            <Lines lines={visit.lines} />
          ) : (
            <p>Entries were added; none of them moved the standings.</p>
          )}
        </div>
      ) : null}
      {visit === null && moves.length === 0 ? (
        <p className="text-quiet">
          Nothing while you are here. A posted measurement moves this page by itself, and what moved
          is said here.
        </p>
      ) : null}
    </>
  );
}

interface Move {
  at: string;
  size: number;
  lines: string[];
}

/** What moved under the reader's eyes, the newest first, five at most. */
function useMoves(digest: StandingsDigest): Move[] {
  const [shown, setShown] = useState(digest);
  const [moves, setMoves] = useState<Move[]>([]);
  if (shown.size !== digest.size) {
    // Set while rendering, as React asks for state that follows from changed properties.
    setShown(digest);
    const lines = whatMoved(shown, digest);
    if (lines.length > 0) {
      setMoves([{ at: digest.at, size: digest.size, lines }, ...moves].slice(0, 5));
    }
  }
  return moves;
}

/** What moved between the reader's last visit and the state in which the page opened. */
function useLastVisit(campaign: string, digest: StandingsDigest) {
  const [opened] = useState(digest);
  const [last] = useState(() => (typeof localStorage === "undefined" ? null : lastVisit(campaign)));
  const inBrowser = useSyncExternalStore(
    never,
    () => true,
    () => false,
  );
  useEffect(() => rememberVisit(campaign, digest), [campaign, digest]);
  if (!inBrowser || last === null || last.size >= opened.size) return null;
  return { since: last.at, lines: whatMoved(last, opened) };
}

const never = () => () => {};

function Lines({ lines }: { lines: readonly string[] }) {
  return (
    <ul className="list-none">
      {lines.map((line) => (
        <li key={line}>{line}</li>
      ))}
    </ul>
  );
}

const nameOf = (campaign: string) => `weighhouse:visit:${campaign}`;

function lastVisit(campaign: string): StandingsDigest | null {
  try {
    const text = localStorage.getItem(nameOf(campaign));
    const read = text === null ? null : (JSON.parse(text) as StandingsDigest);
    return read && Array.isArray(read.verdicts) && Array.isArray(read.hypotheses) ? read : null;
  } catch {
    // Storage may be shut or hold another version's text: then there is no last visit.
    return null;
  }
}

function rememberVisit(campaign: string, digest: StandingsDigest) {
  try {
    localStorage.setItem(nameOf(campaign), JSON.stringify(digest));
  } catch {
    // A browser that keeps nothing just tells nothing at the next visit.
  }
}
