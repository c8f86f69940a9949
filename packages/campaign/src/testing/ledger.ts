import { nobleHasher } from "@weighhouse/ledger/noble-hasher";
import { sealDigest } from "@weighhouse/ledger/seal";
import { citationCode } from "../citation-code";
import type { LedgerRecord } from "../changes";
import type { EntryKind, PayloadInput } from "../entries";
import { foldRecords } from "../fold";
import { STANDINGS_FORMAT } from "../standings";

/** The time of the entry of a day: they stand a day apart. */
export const at = (day: number) => `2031-01-${String(day).padStart(2, "0")}T08:00:00.000001Z`;

export const LEDGER_ID = "weighhouse/3f1c";

/** Entries one after another, a day apart. */
export class Ledger {
  readonly records: LedgerRecord[] = [];
  #by: LedgerRecord["by"] = { member: "member-1", team: null };

  /** Who makes the entries from here on; null: the system. */
  by(team: string | null, member = `${team ?? "nobody's"}-member`): this {
    this.#by = { member, team };
    return this;
  }

  bySystem(): this {
    this.#by = { system: true };
    return this;
  }

  add<K extends EntryKind>(kind: K, payload: PayloadInput<K>): this {
    const seq = this.records.length;
    this.records.push({ seq, at: at(seq + 1), by: this.#by, kind, payload });
    return this;
  }

  get document() {
    return foldRecords(this.records);
  }

  hypothesis(key: string) {
    return this.document.hypotheses.find((one) => one.key === key)!;
  }

  measurement(id: string) {
    return this.document.measurements.find((one) => one.id === id);
  }

  measurand(key: string) {
    return this.document.measurands.find((one) => one.key === key)!;
  }
}

export const NONCE = "0b".repeat(32);

type Bound = { team: string | null; hypothesis: string | null; measurand: string };

/** A seal of a content, and what opens it. */
export function sealOf(bound: Bound, content: Record<string, unknown>) {
  const digest = sealDigest(nobleHasher, { ledger: LEDGER_ID, ...bound, nonce: NONCE, content });
  return { digest, opening: { digest, nonce: NONCE, content } };
}

/** An invented dune with two teams, a measurand measured and one not, and two hypotheses. */
export function openedDune(): Ledger {
  return new Ledger()
    .add("campaign.opened", {
      ledger: LEDGER_ID,
      clock: "simulated",
      visibility: "public",
      key: "dune",
      title: "Why the dune hums",
      registrationCloses: "2031-01-25T00:00:00Z",
    })
    .add("observable.declared", { key: "pitch", title: "Pitch", unit: "Hz", scale: "linear" })
    .add("measurand.declared", measurandOf("crest"))
    .add("measurand.declared", measurandOf("foot"))
    .add("team.joined", { key: "grain" })
    .add("team.joined", { key: "wind" })
    .by("grain")
    .add("hypothesis.registered", {
      key: "slip",
      title: "Slip",
      team: "grain",
      parameters: [{ key: "f0", prior: { family: "normal", mean: 80, sd: 10 } }],
      predictions: [{ measurand: "crest", expected: "f0" }],
    })
    .by("wind")
    .add("hypothesis.registered", {
      key: "flutter",
      title: "Flutter",
      team: "wind",
      predictions: [],
    })
    .by(null);
}

export function measurandOf(key: string): PayloadInput<"measurand.declared"> {
  return {
    key,
    observable: "pitch",
    reference: { family: "uniform", lower: 0, upper: 200 },
    thresholds: [{ key: "audible", value: 20 }],
  };
}

export function reading(id: string, more: Record<string, unknown> = {}) {
  const content = { id, measurand: "crest", facility: "mast", value: 80, sd: 2 };
  return { ...content, observedAt: "2031-01-02T00:00:00Z", ...more };
}

/** Standings as of a size, as far as the ledger's rules look at them, and their citation. */
export function citationOf(size: number): PayloadInput<"standings.cited"> {
  const standings = { format: STANDINGS_FORMAT, campaign: "dune", asOf: { size, treeHead: "" } };
  return { code: citationCode(standings), by: "hand", standings };
}
