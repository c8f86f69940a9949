import type { EntryKind } from "./entries";
import type { RecordOf } from "./ledger-record";
import { CAMPAIGN_PART } from "./parts";
import type { PartName } from "./parts";

/** The parts that an entry's rules and effects look at: what to have at hand before it is applied. */
export type Reads = {
  keys: { part: PartName; key: string }[];
  /** Kinds of parts of which all are looked at; measurements are never among them. */
  whole: PartName[];
  /** Facilities all of whose measurements are looked at. */
  facilities: string[];
};

type Wanted = Partial<Omit<Reads, "keys">> & { keys?: [PartName, string][] };

export function readsOf(record: Pick<RecordOf<EntryKind>, "kind" | "payload">): Reads {
  const wanted = (readsByKind[record.kind] as (payload: unknown) => Wanted)(record.payload);
  const keys: [PartName, string][] = [["campaign", CAMPAIGN_PART], ...(wanted.keys ?? [])];
  return {
    keys: keys.map(([part, key]) => ({ part, key })),
    whole: wanted.whole ?? [],
    facilities: wanted.facilities ?? [],
  };
}

/** Measurands and derived values share one list of keys. */
const target = (key: string): [PartName, string][] => [
  ["measurand", key],
  ["derived", key],
];
const measurement = (id: string): [PartName, string] => ["measurement", id];

const readsByKind: { [K in EntryKind]: (payload: RecordOf<K>["payload"]) => Wanted } = {
  "campaign.opened": () => ({}),
  "campaign.amended": () => ({ whole: ["measurand"] }),
  "observable.declared": ({ key }) => ({ keys: [["observable", key]] }),
  "measurand.declared": ({ key }) => ({ keys: target(key) }),
  "measurand.closed": ({ key, replacedBy }) => ({
    keys: [["measurand", key], ...(replacedBy === null ? [] : target(replacedBy))],
  }),
  "derived.declared": ({ key }) => ({ keys: target(key) }),
  "shared-error.declared": ({ key }) => ({ keys: [["sharedError", key]] }),
  "facility.declared": ({ key }) => ({ keys: [["facility", key]] }),
  "team.joined": ({ key }) => ({ keys: [["team", key]] }),
  "measurand.proposed": ({ measurand }) => ({ keys: target(measurand.key) }),
  "reference.objected": ({ measurand }) => ({ keys: [["measurand", measurand]] }),
  "hypothesis.registered": ({ key }) => ({ keys: [["hypothesis", key]], whole: ["seal"] }),
  "hypothesis.amended": ({ key }) => ({ keys: [["hypothesis", key]], whole: ["seal"] }),
  "hypothesis.retired": ({ key }) => ({ keys: [["hypothesis", key]] }),
  "prediction.sealed": ({ hypothesis, measurand }) => ({
    keys: [["hypothesis", hypothesis], ...target(measurand)],
    whole: ["seal"],
  }),
  // Which hypothesis it is only the seal says.
  "prediction.revealed": () => ({ whole: ["seal", "hypothesis"] }),
  "registration.closed": () => ({}),
  "measurements.posted": ({ measurements, correlations }) => ({
    keys: [
      ...measurements.map(({ id }) => measurement(id)),
      ...[...new Set(measurements.map((one) => one.measurand))].map((key): [PartName, string] => [
        "measurand",
        key,
      ]),
      ...correlations.flatMap(({ a, b }): [PartName, string][] => [
        measurement(a),
        measurement(b),
        ["correlation", `${a} ${b}`],
      ]),
    ],
  }),
  "measurement.corrected": ({ measurement: { id, measurand } }) => ({
    keys: [measurement(id), ["measurand", measurand]],
  }),
  "measurements.withdrawn": ({ selection }) =>
    selection.by === "ids"
      ? { keys: selection.ids.map(measurement) }
      : { facilities: [selection.facility] },
  "measurement.set-aside": ({ id }) => ({ keys: [measurement(id)] }),
  "measurement.sealed": ({ digest, measurand }) => ({
    keys: [
      ["seal", digest],
      ["measurand", measurand],
    ],
  }),
  "measurement.revealed": ({ digest, content }) => ({
    keys: [
      ["seal", digest],
      ...(typeof content["id"] === "string" ? [measurement(content["id"])] : []),
      ...(typeof content["measurand"] === "string"
        ? ([["measurand", content["measurand"]]] as [PartName, string][])
        : []),
    ],
  }),
  "remark.made": ({ on }) => ({ keys: [["remark", String(on)]] }),
  "standings.cited": ({ code }) => ({ keys: [["citation", code]] }),
  "ledger.restored": () => ({}),
};
