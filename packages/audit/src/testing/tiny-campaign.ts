import { writeArchive } from "../write";
import { archiveInputOf, LEDGER_ID } from "./archive-input";
import { fixedSigner } from "./synthetic-ledger";
import type { Posting } from "./synthetic-ledger";

/** The smallest campaign that compares anything: a hypothesis and the no-model range, one measurement. */
export function tinyArchive(): Uint8Array {
  const hypothesis = (key: string, expected: number): Posting => ({
    kind: "hypothesis.registered",
    payload: {
      key,
      title: key,
      predictions: [{ measurand: "drip", expected, tolerance: { family: "normal", sd: 1 } }],
    },
  });
  const transactions: Posting[][] = [
    [
      {
        kind: "campaign.opened",
        payload: {
          key: "dripping-cave",
          title: "Why the cave drips",
          ledger: LEDGER_ID,
          clock: "real",
          visibility: "public",
        },
      },
      {
        kind: "observable.declared",
        payload: { key: "rate", title: "Rate", unit: "1/min", scale: "linear" },
      },
      {
        kind: "measurand.declared",
        payload: {
          key: "drip",
          observable: "rate",
          reference: { family: "uniform", lower: 0, upper: 20 },
        },
      },
      hypothesis("rain", 6),
    ],
    [
      {
        kind: "measurements.posted",
        payload: { measurements: [{ id: "a", measurand: "drip", value: 6.4, sd: 0.5 }] },
      },
    ],
  ];
  return writeArchive(
    archiveInputOf("dripping-cave", transactions, fixedSigner("house.example", 1)),
  );
}
