import { nodeHasher } from "@weighhouse/ledger/node-hasher";
import { sealDigest } from "@weighhouse/ledger/seal";
import { LEDGER_ID } from "./archive-input";
import { marshTransactions } from "./marsh-campaign";
import type { Posting } from "./synthetic-ledger";

export const NONCE = "5a".repeat(32);
const UNTIL = "2031-02-02T00:00:00Z";

const sealedPrediction = {
  measurand: "vapour-june",
  expected: 9,
  tolerance: { family: "normal", sd: 3 },
};

const sealedMeasurement = {
  id: "jetty:6",
  measurand: "droplet-may",
  facility: "jetty",
  observedAt: "2031-02-01T02:40:00Z",
  value: 12.9,
  sd: 1.4,
};

type Bound = { team?: string | null; hypothesis?: string | null; measurand: string };

export function digestOf(bound: Bound, content: object): string {
  const { team = null, hypothesis = null, measurand } = bound;
  const sealed = { ledger: LEDGER_ID, team, hypothesis, measurand, nonce: NONCE, content };
  return sealDigest(nodeHasher, sealed);
}

export function sealing(kind: "prediction" | "measurement", team: string | null = null): Posting {
  const measurand = kind === "prediction" ? "vapour-june" : "droplet-may";
  const hypothesis = kind === "prediction" ? { hypothesis: "cold-air" } : {};
  const content = kind === "prediction" ? sealedPrediction : sealedMeasurement;
  const digest = digestOf({ team, measurand, ...hypothesis }, content);
  const payload = { digest, measurand, until: UNTIL, keeping: "kept", ...hypothesis };
  return { kind: `${kind}.sealed`, payload };
}

export function opening(
  kind: "prediction" | "measurement",
  change: { content?: object; nonce?: string } = {},
): Posting {
  const { digest } = sealing(kind).payload as { digest: string };
  const whole = kind === "prediction" ? sealedPrediction : sealedMeasurement;
  const { content = {}, nonce = NONCE } = change;
  return {
    kind: `${kind}.revealed`,
    payload: { digest, nonce, content: { ...whole, ...content } },
  };
}

/**
 * The marsh with the rest of what a ledger can hold: a sealed prediction and a sealed measurement,
 * both opened, one seal still closed, a correction, a withdrawal, a remark, an amended hypothesis.
 */
export function sealedTransactions(): Posting[][] {
  const [declared, warm, cold, first, ...rest] = marshTransactions() as [
    Posting[],
    Posting[],
    Posting[],
    Posting[],
    ...Posting[][],
  ];
  const stillClosed = { ...(sealing("measurement").payload as object), digest: "ab".repeat(32) };
  return [
    declared,
    warm,
    cold,
    [sealing("prediction"), sealing("measurement")],
    [{ kind: "measurement.sealed", payload: stillClosed }],
    first,
    ...rest,
    [opening("prediction"), opening("measurement")],
    [
      {
        kind: "measurement.corrected",
        payload: {
          reason: "the zero was read again",
          measurement: {
            id: "jetty:2",
            measurand: "vapour-may",
            facility: "jetty",
            observedAt: "2031-02-01T02:30:00Z",
            value: 20.3,
            sd: 0.9,
            shared: [{ error: "hygrometer" }],
          },
        },
      },
      {
        kind: "measurements.withdrawn",
        payload: { selection: { by: "ids", ids: ["jetty:4"] }, reason: "fog on the lens" },
      },
      { kind: "remark.made", payload: { on: 3, kind: "question", text: "Why so broad?" } },
    ],
  ];
}
