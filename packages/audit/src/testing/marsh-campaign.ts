import type { NoteSigner } from "@weighhouse/ledger/signed-note";
import type { ArchiveInput } from "../write";
import { archiveInputOf, LEDGER_ID } from "./archive-input";
import { fixedSigner } from "./synthetic-ledger";
import type { Posting, SyntheticLedger } from "./synthetic-ledger";

/** An invented campaign: why does a marsh in an invented valley steam before dawn? */
export function marshTransactions(clock: "real" | "simulated" = "real"): Posting[][] {
  return [
    [
      {
        kind: "campaign.opened",
        payload: {
          key: "steaming-marsh",
          title: "Why the marsh steams before dawn",
          ledger: LEDGER_ID,
          clock,
          visibility: "public",
        },
      },
      observable("vapour", { title: "Vapour density", unit: "g/m^3", scale: "linear" }),
      observable("droplet", { title: "Droplet diameter", unit: "um", scale: "log10" }),
      measurand("vapour-may", "vapour", { family: "uniform", lower: 0, upper: 40 }),
      measurand("droplet-may", "droplet", { family: "uniform", lower: 1, upper: 100 }),
      measurand("vapour-june", "vapour", { family: "normal", mean: 15, sd: 10 }),
      {
        kind: "shared-error.declared",
        payload: { key: "hygrometer", title: 'Zero of the "old" hygrometer, by hand', sd: 0.4 },
      },
      { kind: "facility.declared", payload: { key: "jetty", title: "Jetty" } },
      { kind: "team.joined", payload: { key: "spring-side", title: "Spring side" } },
    ],
    [
      hypothesis("warm-spring", "A warm spring under the reeds", [
        { measurand: "vapour-may", expected: 21, tolerance: { family: "normal", sd: 2 } },
        { measurand: "droplet-may", expected: 12, tolerance: { family: "normal", sd: 0.1 } },
        { measurand: "vapour-june", expected: 20, tolerance: { family: "normal", sd: 2 } },
      ]),
    ],
    [
      hypothesis("cold-air", "Cold air from the\nside valley", [
        { measurand: "vapour-may", expected: 14, tolerance: { family: "normal", sd: 3 } },
        { measurand: "droplet-may", expected: 30, tolerance: { family: "normal", sd: 0.2 } },
      ]),
    ],
    [
      posted([
        measurement("jetty:1", "vapour-may", { value: 19.2, sd: 0.8, shared: true }),
        measurement("jetty:2", "vapour-may", { value: 20.1, sd: 0.9, shared: true }),
      ]),
    ],
    [
      hypothesis("late-comer", "Peat that heats itself", [
        { measurand: "vapour-may", expected: 19.6, tolerance: { family: "normal", sd: 0.5 } },
        { measurand: "vapour-june", expected: 18, tolerance: { family: "normal", sd: 4 } },
      ]),
    ],
    [posted([measurement("jetty:3", "droplet-may", { value: 13.5, sd: 1.1 })])],
    [
      posted([
        measurement("jetty:4", "vapour-june", { value: 17.4, sd: 0.7, shared: true }),
        measurement("jetty:5", "vapour-june", { value: 2.2, sd: 0.7 }),
      ]),
      { kind: "measurement.set-aside", payload: { id: "jetty:5", reason: "the cap was on" } },
    ],
    [{ kind: "registration.closed", payload: { by: "coordinator" } }],
  ];
}

/** What `writeArchive` takes, for the marsh or for other transactions of the same campaign. */
export function archiveInput(
  transactions: Posting[][] = marshTransactions(),
  signer: NoteSigner = fixedSigner("house.example", 1),
): ArchiveInput & SyntheticLedger {
  return archiveInputOf("steaming-marsh", transactions, signer);
}

function observable(key: string, fields: object): Posting {
  return { kind: "observable.declared", payload: { key, ...fields } };
}

function measurand(key: string, of: string, reference: object): Posting {
  return { kind: "measurand.declared", payload: { key, observable: of, reference } };
}

function hypothesis(key: string, title: string, predictions: object[]): Posting {
  return {
    kind: "hypothesis.registered",
    payload: { key, title: title.replaceAll("\n", " "), statement: title, predictions },
  };
}

function posted(measurements: object[]): Posting {
  return { kind: "measurements.posted", payload: { measurements } };
}

function measurement(
  id: string,
  of: string,
  { value, sd, shared = false }: { value: number; sd: number; shared?: boolean },
): object {
  return {
    id,
    measurand: of,
    facility: "jetty",
    observedAt: "2031-02-01T02:30:00Z",
    value,
    sd,
    shared: shared ? [{ error: "hygrometer" }] : [],
  };
}
