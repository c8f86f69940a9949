import type { PayloadInput } from "@weighhouse/campaign/entries";
import { createAuth } from "@weighhouse/api/auth";
import { addMember } from "@weighhouse/desk/add-member";
import { addTeam } from "@weighhouse/desk/add-team";
import { closeRegistration } from "@weighhouse/desk/close-registration";
import {
  declareFacility,
  declareMeasurand,
  declareObservable,
  declareSharedError,
} from "@weighhouse/desk/declare";
import type { Actor, Desk } from "@weighhouse/desk/desk";
import { openCampaign } from "@weighhouse/desk/open-campaign";
import { postMeasurements } from "@weighhouse/desk/post-measurements";
import { registerHypothesis } from "@weighhouse/desk/register-hypothesis";
import { findCampaign } from "@weighhouse/store/campaigns";
import { KeptHeads } from "@weighhouse/store/kept-heads";
import { openKeys } from "@weighhouse/store/keys";
import { openStore } from "@weighhouse/store/open-store";
import type { Store } from "@weighhouse/store/open-store";
import { StoreError } from "@weighhouse/store/store-error";
import { say } from "../say";
import { demoPassword, demoPeople, isDemoMade, markDemoMade } from "./accounts";
import { postings } from "./readings";
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
type Act = (email: string) => { desk: Desk; actor: NonNullable<Actor> };
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
  const store = await openStore({ url: place.url, signer, keptHeads });
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
  const later = [
    ...scenario.hypotheses.map(({ at, content }) => ({ at, act: () => register(as, content) })),
    { at: scenario.registrationClosedAt, act: () => close(as) },
    ...postings.map(({ at, readings }) => ({ at, act: () => post(as, readings) })),
    {
      at: scenario.lateHypothesis.at,
      act: () => register(as, scenario.lateHypothesis.content),
    },
  ].sort((a, b) => a.at.localeCompare(b.at));
  return [
    ...declarations(as).map((act) => ({ at: startsAt, makesEntry: true, act })),
    { at: startsAt, makesEntry: false, act: () => addMembers(as) },
    ...later.map((step) => ({ ...step, makesEntry: true })),
  ];
}

function declarations(as: Act): Step["act"][] {
  const { desk, actor } = as("coordinator@demo.example");
  const key = scenario.demoKey;
  return [
    () => openCampaign(desk, actor, { campaign: scenario.campaign, visibility: "public" }),
    ...scenario.observables.map(
      (observable) => () => declareObservable(desk, actor, { key, observable }),
    ),
    ...scenario.measurands.map(
      (measurand) => () => declareMeasurand(desk, actor, { key, measurand }),
    ),
    ...scenario.sharedErrors.map(
      (sharedError) => () => declareSharedError(desk, actor, { key, sharedError }),
    ),
    ...scenario.facilities.map((facility) => () => declareFacility(desk, actor, { key, facility })),
    ...scenario.teams.map((team) => () => addTeam(desk, actor, { key, team })),
  ];
}

async function addMembers(as: Act): Promise<void> {
  const { desk, actor } = as("coordinator@demo.example");
  for (const { email, role, team } of demoPeople) {
    if (role !== "member") continue;
    await addMember(desk, actor, { key: scenario.demoKey, email, role, team });
  }
}

function close(as: Act) {
  const { desk, actor } = as("coordinator@demo.example");
  return closeRegistration(desk, actor, { key: scenario.demoKey });
}

async function register(as: Act, hypothesis: PayloadInput<"hypothesis.registered">): Promise<void> {
  const { desk, actor } = as(`${hypothesis.team}@demo.example`);
  await registerHypothesis(desk, actor, { key: scenario.demoKey, hypothesis });
}

async function post(as: Act, drafts: Record<string, unknown>[]): Promise<void> {
  const { desk, actor } = as("observer@demo.example");
  await postMeasurements(desk, actor, {
    key: scenario.demoKey,
    source: { from: "drafts", drafts },
  });
}
