import { createAuth } from "@weighhouse/api/auth";
import type { Actor, Desk } from "@weighhouse/desk/desk";
import { findCampaign } from "@weighhouse/store/campaigns";
import { KeptHeads } from "@weighhouse/store/kept-heads";
import { openKeys, openSealKey } from "@weighhouse/store/keys";
import { openStore } from "@weighhouse/store/open-store";
import type { Store } from "@weighhouse/store/open-store";
import { StoreError } from "@weighhouse/store/store-error";
import { say } from "../say";
import { demoPassword, demoPeople, isDemoMade, markDemoMade } from "./accounts";
import * as acts from "./acts";
import type { Act } from "./acts";
import * as readings from "./readings";
import * as scenario from "./scenario";

export type DemoPlace = {
  home: string;
  url: string;
  keys: string;
  origin: string;
  secret: string;
  /** Asked before each step; the next start goes on from there. */
  stopping: { readonly aborted: boolean };
};
/** One transaction of the demo, and whether it makes an entry: one then, always. */
type Step = { at: string; makesEntry: boolean; act: () => Promise<unknown> };

/**
 * Makes the demo campaign on the first start, by the use-cases that the pages call. Its clock is
 * simulated, which entry 0 of its ledger says and every page repeats. A start that was cut short
 * has left the first entries of it, and the next one makes the others.
 */
export async function makeDemo(place: DemoPlace): Promise<void> {
  const signer = await openKeys({
    folder: place.keys,
    name: new URL(place.origin).hostname,
    make: false,
  });
  const keptHeads = new KeptHeads(place.keys);
  const sealKey = openSealKey({ folder: place.keys, make: false });
  const store = await openStore({ url: place.url, signer, sealKey, keptHeads });
  try {
    const from = await entriesMade(store);
    // Only until it is whole: then it is the users' campaign, whatever they make of it.
    if (from > 0 && isDemoMade(place.home)) return;
    say(from === 0 ? "making the demo campaign" : "making the rest of the demo campaign");
    const actors = await makeAccounts(store, place);
    if (await play(store, actors, { from, stopping: place.stopping })) markDemoMade(place.home);
  } finally {
    await store.close();
  }
}

async function entriesMade(store: Store): Promise<number> {
  try {
    return (await findCampaign(store, scenario.demoKey)).size;
  } catch (error) {
    if (error instanceof StoreError && error.code === "no-such-campaign") return 0;
    throw error;
  }
}

async function makeAccounts(
  store: Store,
  place: DemoPlace,
): Promise<Map<string, NonNullable<Actor>>> {
  const auth = createAuth({ store, origin: place.origin, secret: place.secret });
  const password = demoPassword(place.home);
  const actors = new Map<string, NonNullable<Actor>>();
  for (const { email, name } of demoPeople) {
    // A first start that was cut short has left accounts: they are the same people.
    const { user } = await auth.api
      .signUpEmail({ body: { email, name, password } })
      .catch(() => auth.api.signInEmail({ body: { email, password } }));
    actors.set(email, { userId: user.id, name });
  }
  return actors;
}

/** Plays the steps whose entries are not there yet; false where it was told to stop before the end. */
async function play(
  store: Store,
  actors: Map<string, NonNullable<Actor>>,
  { from, stopping }: { from: number; stopping: DemoPlace["stopping"] },
): Promise<boolean> {
  let now = startsAt;
  const desk: Desk = { store, clock: () => now.replace(/Z$/, ".000000Z") };
  const as: Act = (email) => {
    const actor = actors.get(email);
    if (!actor) throw new Error(`no demo account ${email}`);
    return { desk, actor };
  };
  let seq = 0;
  for (const { at, makesEntry, act } of steps(as)) {
    if (makesEntry && seq++ < from) continue;
    if (stopping.aborted) return false;
    now = at;
    await act();
  }
  return true;
}

const startsAt = "2025-01-06T08:00:00Z";

function steps(as: Act): Step[] {
  const { hypotheses, lateHypothesis, keptSeal, heldSeal } = scenario;
  const { postings, withdrawn, corrected } = readings;
  const later = [
    ...[...hypotheses, lateHypothesis].map(({ at, content }) => ({
      at,
      act: () => acts.register(as, content),
    })),
    { at: keptSeal.at, act: () => acts.sealKept(as, keptSeal) },
    { at: heldSeal.at, act: () => acts.sealHeld(as, heldSeal) },
    { at: scenario.registrationClosedAt, act: () => acts.close(as) },
    ...postings.map(({ at, readings: drafts }) => ({ at, act: () => acts.post(as, drafts) })),
    { at: withdrawn.at, act: () => acts.withdraw(as, withdrawn) },
    { at: corrected.at, act: () => acts.correct(as, corrected) },
    { at: keptSeal.until, act: () => acts.openKept(as, keptSeal) },
  ].sort((a, b) => a.at.localeCompare(b.at));
  return [
    ...acts.declarations(as).map((act) => ({ at: startsAt, makesEntry: true, act })),
    { at: startsAt, makesEntry: false, act: () => acts.addMembers(as) },
    ...later.map((step) => ({ ...step, makesEntry: true })),
  ];
}
