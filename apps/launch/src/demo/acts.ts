import { createHash } from "node:crypto";
import { predictionContentSchema } from "@weighhouse/campaign/entries";
import type { PayloadInput } from "@weighhouse/campaign/entries";
import { addMember } from "@weighhouse/desk/add-member";
import { addTeam } from "@weighhouse/desk/add-team";
import { closeRegistration } from "@weighhouse/desk/close-registration";
import { correctMeasurement } from "@weighhouse/desk/correct-measurement";
import {
  declareFacility,
  declareMeasurand,
  declareObservable,
  declareSharedError,
} from "@weighhouse/desk/declare";
import type { Actor, Desk } from "@weighhouse/desk/desk";
import { openCampaign } from "@weighhouse/desk/open-campaign";
import { openSeal } from "@weighhouse/desk/open-seal";
import { postMeasurements } from "@weighhouse/desk/post-measurements";
import { registerHypothesis } from "@weighhouse/desk/register-hypothesis";
import { sealPrediction } from "@weighhouse/desk/seal-prediction";
import { withdrawMeasurements } from "@weighhouse/desk/withdraw-measurements";
import { nodeHasher } from "@weighhouse/ledger/node-hasher";
import { sealDigest } from "@weighhouse/ledger/seal";
import { findCampaign } from "@weighhouse/store/campaigns";
import { demoPeople } from "./accounts";
import type { Reading } from "./readings";
import * as scenario from "./scenario";
import type { Seal } from "./scenario";

/** The use-cases' desk, and the demo's account of that address. */
export type Act = (email: string) => { desk: Desk; actor: NonNullable<Actor> };

const key = scenario.demoKey;

export function declarations(as: Act): (() => Promise<unknown>)[] {
  const { desk, actor } = as("coordinator@demo.example");
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

export async function addMembers(as: Act): Promise<void> {
  const { desk, actor } = as("coordinator@demo.example");
  for (const { email, role, team } of demoPeople) {
    if (role !== "member") continue;
    await addMember(desk, actor, { key: key, email, role, team });
  }
}

export function close(as: Act) {
  const { desk, actor } = as("coordinator@demo.example");
  return closeRegistration(desk, actor, { key: key });
}

export async function register(
  as: Act,
  hypothesis: PayloadInput<"hypothesis.registered">,
): Promise<void> {
  const { desk, actor } = as(`${hypothesis.team}@demo.example`);
  await registerHypothesis(desk, actor, { key: key, hypothesis });
}

export async function post(as: Act, drafts: Record<string, unknown>[]): Promise<void> {
  const { desk, actor } = as("observer@demo.example");
  await postMeasurements(desk, actor, {
    key: key,
    source: { from: "drafts", drafts },
  });
}
type Withdrawal = { ids: string[]; reason: string };

export async function withdraw(as: Act, { ids, reason }: Withdrawal): Promise<void> {
  const { desk, actor } = as("coordinator@demo.example");
  await withdrawMeasurements(desk, actor, { key, selection: { by: "ids", ids }, reason });
}

type Correction = { measurement: Reading; reason: string };

export async function correct(as: Act, { measurement, reason }: Correction): Promise<void> {
  const { desk, actor } = as("coordinator@demo.example");
  await correctMeasurement(desk, actor, { key, measurement, reason });
}

/** The server holds the prediction. */
export async function sealHeld(as: Act, { hypothesis, until, prediction }: Seal): Promise<void> {
  const { desk, actor } = byTeamOf(as, hypothesis);
  const seal = { keeping: "held" as const, prediction };
  await sealPrediction(desk, actor, { key, hypothesis, until, seal });
}

/** Only the digest is filed, as of a file that `weighhouse seal` wrote. */
export async function sealKept(as: Act, sealed: Seal): Promise<void> {
  const { desk, actor } = byTeamOf(as, sealed.hypothesis);
  const { hypothesis, until, prediction } = sealed;
  const { digest } = await openingOf(desk, sealed);
  const seal = { keeping: "kept" as const, digest, measurand: prediction.measurand };
  await sealPrediction(desk, actor, { key, hypothesis, until, seal });
}

export async function openKept(as: Act, sealed: Seal): Promise<void> {
  const { desk, actor } = byTeamOf(as, sealed.hypothesis);
  await openSeal(desk, actor, { key, ...(await openingOf(desk, sealed)) });
}

/** The nonce is the same at each asking, so that a demo cut short between the two goes on. */
async function openingOf({ store }: Desk, { hypothesis, prediction }: Seal) {
  const { ledger } = await findCampaign(store, key);
  const content = predictionContentSchema.parse(prediction);
  const nonce = createHash("sha256").update(`${ledger} ${hypothesis}`).digest("hex");
  const bound = { ledger, team: teamOf(hypothesis), hypothesis, measurand: prediction.measurand };
  return { digest: sealDigest(nodeHasher, { ...bound, nonce, content }), nonce, content };
}

function byTeamOf(as: Act, hypothesis: string): ReturnType<Act> {
  return as(`${teamOf(hypothesis)}@demo.example`);
}

function teamOf(hypothesis: string): string {
  const found = scenario.hypotheses.find(({ content }) => content.key === hypothesis);
  if (!found?.content.team) throw new Error(`no demo hypothesis ${hypothesis} of a team`);
  return found.content.team;
}
