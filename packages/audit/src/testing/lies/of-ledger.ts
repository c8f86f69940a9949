import type { CheckName } from "../../checks/line";
import { writeArchive } from "../../write";
import { forgeLedger } from "../forge";
import { LEDGER_ID } from "../archive-input";
import { archiveInput } from "../marsh-campaign";
import { opening, sealedTransactions, sealing } from "../sealed-marsh";
import { appendTransactions } from "../synthetic-ledger";
import type { Posting } from "../synthetic-ledger";
import { house } from "../verify-marsh";
import type { Lie } from "./lie";

const archive = writeArchive(archiveInput(sealedTransactions()));

type Row = [
  name: string,
  change: (all: Posting[][]) => Posting[][],
  check: CheckName,
  reason: string,
];

const rules = "rules of the entries";
const last = (posting: Posting) => (all: Posting[][]) => [...all, [posting]];
/** Puts another posting in the place of the first of its kind. */
const instead =
  (posting: Posting, kind = posting.kind) =>
  (all: Posting[][]) =>
    all.map((transaction) => transaction.map((one) => (one.kind === kind ? posting : one)));

const measurand = (reference: object, more: object = {}): Posting => ({
  kind: "measurand.declared",
  payload: { key: "vapour-may", observable: "vapour", reference, ...more },
});

/** Entries that no server would have appended, in a ledger whose every hash and signature is good. */
const rows: Row[] = [
  [
    "a reference changed after a measurement",
    last(measurand({ family: "uniform", lower: 15, upper: 25 })),
    rules,
    "payloads.ndjson, line 26: entry 25, measurand.declared: /reference",
  ],
  [
    "a scatter added after a measurement",
    last(measurand({ family: "uniform", lower: 0, upper: 40 }, { scatter: 3 })),
    rules,
    "payloads.ndjson, line 26: entry 25, measurand.declared: /scatter",
  ],
  [
    "a rule changed after data",
    last({
      kind: "campaign.amended",
      payload: {
        key: "steaming-marsh",
        title: "Why the marsh steams before dawn",
        visibility: "public",
        rule: { pass: 0.5 },
      },
    }),
    rules,
    "payloads.ndjson, line 26: entry 25, campaign.amended: /rule",
  ],
  [
    "a seal opened with another content",
    instead(opening("prediction", { content: { expected: 17 } })),
    rules,
    "prediction.revealed: /content: found content, nonce and seal of digest",
  ],
  [
    "a seal opened with another nonce",
    instead(opening("prediction", { nonce: "5b".repeat(32) })),
    "seals",
    "(entry 20, prediction.revealed): opens to digest",
  ],
  [
    "a sealed measurement opened with another content",
    instead(opening("measurement", { content: { value: 30 } })),
    "seals",
    "(entry 21, measurement.revealed): opens to digest",
  ],
  [
    "a seal opened that nobody made",
    instead({
      kind: "prediction.revealed",
      payload: { ...(opening("prediction").payload as object), digest: "cd".repeat(32) },
    }),
    "seals",
    "(entry 20, prediction.revealed): opens a seal that no entry made",
  ],
  [
    "a seal of another team opened as one's own",
    instead(sealing("prediction", "spring-side")),
    "seals",
    "prediction.revealed): opens",
  ],
  [
    "a seal opened twice",
    last(opening("prediction")),
    rules,
    "line 26: entry 25, prediction.revealed",
  ],
  [
    "a seal made twice",
    (all) => [...all.slice(0, 4), [sealing("measurement")], ...all.slice(4)],
    rules,
    "measurement.sealed: /digest",
  ],
  [
    "a prediction sealed that was made openly",
    last({
      kind: "prediction.sealed",
      payload: {
        digest: "ef".repeat(32),
        hypothesis: "warm-spring",
        measurand: "vapour-may",
        until: "2031-03-01T00:00:00Z",
        keeping: "kept",
      },
    }),
    rules,
    "line 26: entry 25, prediction.sealed: /measurand",
  ],
  [
    "a measurement posted twice",
    last({
      kind: "measurements.posted",
      payload: {
        measurements: [
          { id: "jetty:1", measurand: "vapour-may", facility: "jetty", value: 9, sd: 1 },
        ],
      },
    }),
    rules,
    "line 26: entry 25, measurements.posted: /measurements/0/id",
  ],
  [
    "a correction of what was never posted",
    last({
      kind: "measurement.corrected",
      payload: {
        reason: "x",
        measurement: { id: "jetty:99", measurand: "vapour-may", value: 9, sd: 1 },
      },
    }),
    rules,
    "line 26: entry 25, measurement.corrected",
  ],
  [
    "a withdrawal of what was never posted",
    last({
      kind: "measurements.withdrawn",
      payload: { selection: { by: "ids", ids: ["jetty:99"] }, reason: "x" },
    }),
    rules,
    "line 26: entry 25, measurements.withdrawn",
  ],
  [
    "a hypothesis registered twice",
    last({
      kind: "hypothesis.registered",
      payload: { key: "warm-spring", title: "W", predictions: [] },
    }),
    rules,
    "line 26: entry 25, hypothesis.registered: /key",
  ],
  [
    "a hypothesis amended that isn't there",
    last({ kind: "hypothesis.amended", payload: { key: "no-such", title: "W", predictions: [] } }),
    rules,
    "line 26: entry 25, hypothesis.amended: /key",
  ],
  [
    "a remark on an entry to come",
    last({ kind: "remark.made", payload: { on: 99, kind: "question", text: "Why?" } }),
    rules,
    "line 26: entry 25, remark.made: /on",
  ],
  [
    "a registration closed twice",
    last({ kind: "registration.closed", payload: { by: "coordinator" } }),
    rules,
    "line 26: entry 25, registration.closed",
  ],
];

export const liesOfLedger: Lie[] = rows.map(([name, change, check, reason]) => ({
  name,
  check,
  reason,
  make: () => {
    const transactions = change(sealedTransactions());
    const ledger = appendTransactions("steaming-marsh", LEDGER_ID, transactions, house);
    return forgeLedger(archive, ledger, house);
  },
}));
