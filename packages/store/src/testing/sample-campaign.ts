import { createPrivateKeyPem, signerFromPem } from "@weighhouse/ledger/node-keys";
import type { NewEntry } from "../append";
import { openStore } from "../open-store";
import type { Store } from "../open-store";

// An invented campaign: why a dune hums.

export const opening = (key: string) => ({
  key,
  title: "Why the dune hums",
  visibility: "public",
  registrationCloses: "2044-05-01T00:00:00Z",
});

export const declarations: NewEntry[] = [
  {
    kind: "observable.declared",
    payload: { key: "pitch", title: "Pitch of the hum", unit: "Hz", scale: "linear" },
  },
  {
    kind: "measurand.declared",
    payload: {
      key: "pitch-dry",
      observable: "pitch",
      title: "Pitch in the dry season",
      reference: { family: "uniform", lower: 20, upper: 200 },
    },
  },
  { kind: "facility.declared", payload: { key: "east-mast", title: "East mast" } },
  { kind: "team.joined", payload: { key: "grain-size", title: "Grain size" } },
  {
    kind: "hypothesis.registered",
    payload: {
      key: "resonant-layer",
      title: "A dry layer resonates",
      team: "grain-size",
      predictions: [
        { measurand: "pitch-dry", expected: 95, tolerance: { family: "normal", sd: 4 } },
      ],
    },
  },
];

export function hum(id: string, value: number, more: Record<string, unknown> = {}) {
  return {
    id,
    measurand: "pitch-dry",
    facility: "east-mast",
    observedAt: "2044-06-01T10:00:00Z",
    value,
    sd: 3,
    unit: "Hz",
    ...more,
  };
}

export const system = { system: true } as const;

export async function openTestStore(url: string, connections = 4): Promise<Store> {
  const signer = signerFromPem(createPrivateKeyPem(), "house.example");
  return openStore({ url, signer, connections });
}
