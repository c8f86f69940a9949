import { readEntry } from "@weighhouse/store/read-ledger";
import { readHeld } from "@weighhouse/store/held-seals";
import { StoreError } from "@weighhouse/store/store-error";
import { citationOf } from "./cite-standings";
import type { Desk } from "./desk";
import { DeskError } from "./desk-error";
import { openingOf } from "./open-seal";
import { appendDecided, readNow } from "./record-entries";
import type { Decision, Now } from "./record-entries";
import { isPast, timeAt } from "./time";

/** Something that a date asks for and that could not be done: it is tried again. */
export type Undone = { what: string; why: string };

type Due = { what: string; decide: (now: Now) => Decision | Promise<Decision> };

const SYSTEM = { system: true } as const;

/**
 * Does all that a campaign's dates ask for by now, however long ago they passed: registration
 * closes, held seals are opened, standings are cited at data's close. What is done already is done
 * once; what can't be done stops nothing else.
 */
export async function keepDates(desk: Desk, campaign: string): Promise<Undone[]> {
  const undone: Undone[] = [];
  const due = await dueNow(desk, campaign);
  for (const { what, decide } of due) {
    try {
      await appendDecided(desk, { campaign, by: SYSTEM }, decide);
    } catch (error) {
      if (!(error instanceof DeskError || error instanceof StoreError)) throw error;
      undone.push({ what, why: error.message });
    }
  }
  return undone;
}

async function dueNow(desk: Desk, campaign: string): Promise<Due[]> {
  const now = await readNow(desk, campaign);
  const at = timeAt(desk);
  return [
    ...closingDue(now, at),
    ...openingsDue(desk, campaign, { now, at }),
    ...(await citationDue(desk, campaign, { now, at })),
  ];
}

function closingDue({ parts, document }: Now, at: string): Due[] {
  const main = parts.find(({ part }) => part === "campaign")?.content;
  const closed = (main?.["registrationClosed"] ?? null) !== null;
  if (closed || !isPast(document.campaign.registrationCloses, at)) return [];
  const entry = { kind: "registration.closed", payload: { by: "clock" } } as const;
  return [{ what: "closing registration", decide: () => ({ entries: [entry], fields: [] }) }];
}

function openingsDue(desk: Desk, campaign: string, { now, at }: { now: Now; at: string }): Due[] {
  return now.parts
    .filter(({ part, content }) => {
      const { keeping, revealed, until } = content;
      return (
        part === "seal" && keeping === "held" && revealed === null && isPast(String(until), at)
      );
    })
    .map(({ key: digest }) => ({
      what: `opening the seal ${digest}`,
      decide: async ({ parts }: Now) => {
        const held = await readHeld(desk.store, { campaign, digest });
        if (held === null) {
          throw new StoreError("ledger-broken", `${campaign}: nothing is held under ${digest}`);
        }
        return openingOf(parts, { digest, ...held });
      },
    }));
}

/** An imported campaign whose data closed before it was here is cited by hand, if at all. */
async function citationDue(
  desk: Desk,
  campaign: string,
  { now, at }: { now: Now; at: string },
): Promise<Due[]> {
  const { dataCloses } = now.document.campaign;
  const cited = now.parts.some(
    ({ part, content }) => part === "citation" && content["by"] === "clock",
  );
  if (dataCloses === null || cited || !isPast(dataCloses, at)) return [];
  const { entry } = await readEntry(desk.store, { campaign, seq: 0 });
  if (isPast(dataCloses, entry.at)) return [];
  const decide = (latest: Now) =>
    citationOf(desk, campaign, { now: latest, note: null, by: "clock" });
  return [{ what: "citing the standings at data's close", decide }];
}
