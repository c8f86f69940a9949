import { addMember } from "../add-member";
import { addTeam } from "../add-team";
import {
  declareFacility,
  declareMeasurand,
  declareObservable,
  declareSharedError,
} from "../declare";
import type { Actor } from "../desk";
import { openCampaign } from "../open-campaign";
import type { RegisterHypothesisInput } from "../register-hypothesis";
import type { TestDesk } from "./test-desk";

// An invented campaign: why a lagoon glows on some nights.

type Person = NonNullable<Actor> & { email: string };
export type Lagoon = {
  key: string;
  coordinator: Person;
  /** Of the team algae. */
  member: Person;
  /** Of the team minerals. */
  rival: Person;
  reader: Person;
  /** With an account, and no place in the campaign. */
  stranger: Person;
};

const OPENING = {
  title: "Why the lagoon glows",
  summary: null,
  registrationCloses: "2060-01-01T00:00:00Z",
};

/** Opens the campaign and declares all of it, by the use-cases. */
export async function openLagoon(
  house: TestDesk,
  options: { key?: string; visibility?: "public" | "members" } = {},
): Promise<Lagoon> {
  const { desk } = house;
  const { key = "lagoon-glow", visibility = "public" } = options;
  const [coordinator, member, rival, reader, stranger] = (await Promise.all(
    ["Ada Coord", "Mel Algae", "Rio Minerals", "Rae Reader", "Sam Stranger"].map((name) =>
      house.person(`${name} ${key}`),
    ),
  )) as [Person, Person, Person, Person, Person];
  await openCampaign(desk, coordinator, { campaign: { key, ...OPENING }, visibility });
  const observable = { key: "glow", title: "Surface brightness", unit: "nW", scale: "linear" };
  await declareObservable(desk, coordinator, {
    key,
    observable: { ...observable, scale: "linear" as const },
  });
  for (const measurand of ["new-moon", "full-moon"]) {
    await declareMeasurand(desk, coordinator, {
      key,
      measurand: {
        key: measurand,
        observable: "glow",
        window: { from: "2020-01-01T00:00:00Z", to: "2059-01-01T00:00:00Z" },
        reference: { family: "uniform", lower: 0, upper: 100 },
      },
    });
  }
  await declareSharedError(desk, coordinator, { key, sharedError: { key: "zero", sd: 0.5 } });
  await declareFacility(desk, coordinator, { key, facility: { key: "pier" } });
  await addTeam(desk, coordinator, { key, team: { key: "algae", title: "Algae" } });
  await addTeam(desk, coordinator, { key, team: { key: "minerals", title: "Minerals" } });
  const places = [
    { email: member.email, role: "member", team: "algae" },
    { email: rival.email, role: "member", team: "minerals" },
    { email: reader.email, role: "reader" },
  ] as const;
  for (const place of places) await addMember(desk, coordinator, { key, ...place });
  return { key, coordinator, member, rival, reader, stranger };
}

export function hypothesis(key: string, expected: number): RegisterHypothesisInput["hypothesis"] {
  return {
    key,
    title: key,
    statement: `It is ${key}.`,
    predictions: [{ measurand: "new-moon", expected, tolerance: { family: "normal", sd: 5 } }],
  };
}

export function reading(id: string | null, value: number, more: Record<string, unknown> = {}) {
  return {
    ...(id === null ? {} : { id }),
    measurand: "new-moon",
    facility: "pier",
    observedAt: "2026-02-03T22:00:00Z",
    value,
    sd: 2,
    ...more,
  };
}
