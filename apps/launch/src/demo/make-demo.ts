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
import { listCampaigns } from "@weighhouse/desk/list-campaigns";
import { openCampaign } from "@weighhouse/desk/open-campaign";
import { postMeasurements } from "@weighhouse/desk/post-measurements";
import { registerHypothesis } from "@weighhouse/desk/register-hypothesis";
import { openKeys } from "@weighhouse/store/keys";
import { openStore } from "@weighhouse/store/open-store";
import type { Store } from "@weighhouse/store/open-store";
import { say } from "../say";
import { demoPassword, demoPeople } from "./accounts";
import { postings } from "./readings";
import * as scenario from "./scenario";

type Place = { home: string; url: string; keys: string; origin: string; secret: string };
type Act = (email: string) => { desk: Desk; actor: NonNullable<Actor> };

/**
 * Makes the demo campaign on the first start, by the use-cases that the pages call. Its clock is
 * simulated, which entry 0 of its ledger says and every page repeats.
 */
export async function makeDemo(place: Place): Promise<void> {
  const signer = await openKeys({
    folder: place.keys,
    name: new URL(place.origin).hostname,
    make: false,
  });
  const store = await openStore({ url: place.url, signer });
  try {
    const there = await listCampaigns({ store }, null);
    if (there.some(({ key }) => key === scenario.demoKey)) return;
    say("making the demo campaign");
    const actors = await makeAccounts(store, place);
    await play(store, actors);
  } finally {
    await store.close();
  }
}

async function makeAccounts(store: Store, place: Place): Promise<Map<string, NonNullable<Actor>>> {
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

async function play(store: Store, actors: Map<string, NonNullable<Actor>>): Promise<void> {
  let now = "2025-01-06T08:00:00Z";
  const desk: Desk = { store, clock: () => now.replace(/Z$/, ".000000Z") };
  const as: Act = (email) => {
    const actor = actors.get(email);
    if (!actor) throw new Error(`no demo account ${email}`);
    return { desk, actor };
  };

  const acts = [
    { at: now, act: () => declare(as) },
    ...scenario.hypotheses.map(({ at, content }) => ({ at, act: () => register(as, content) })),
    {
      at: scenario.registrationClosedAt,
      act: () => {
        const { actor } = as("coordinator@demo.example");
        return closeRegistration(desk, actor, { key: scenario.demoKey });
      },
    },
    ...postings.map(({ at, readings }) => ({ at, act: () => post(as, readings) })),
    {
      at: scenario.lateHypothesis.at,
      act: () => register(as, scenario.lateHypothesis.content),
    },
  ].sort((a, b) => a.at.localeCompare(b.at));

  for (const { at, act } of acts) {
    now = at;
    await act();
  }
}

async function declare(as: Act): Promise<void> {
  const { desk, actor } = as("coordinator@demo.example");
  const key = scenario.demoKey;
  await openCampaign(desk, actor, { campaign: scenario.campaign, visibility: "public" });
  for (const observable of scenario.observables) {
    await declareObservable(desk, actor, { key, observable });
  }
  for (const measurand of scenario.measurands) {
    await declareMeasurand(desk, actor, { key, measurand });
  }
  for (const sharedError of scenario.sharedErrors) {
    await declareSharedError(desk, actor, { key, sharedError });
  }
  for (const facility of scenario.facilities) await declareFacility(desk, actor, { key, facility });
  for (const team of scenario.teams) await addTeam(desk, actor, { key, team });
  for (const { email, role, team } of demoPeople) {
    if (role === "member") await addMember(desk, actor, { key, email, role, team });
  }
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
