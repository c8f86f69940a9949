import { describe, expect, test } from "vitest";
import { CampaignError } from "./campaign-error";
import { changesOf } from "./changes";
import type { EntryKind, PayloadInput } from "./entries";
import { CampaignFold, documentFromParts, foldRecords } from "./fold";
import { Parts } from "./parts";
import { readPayload } from "./payloads";
import { at, Ledger } from "./testing/ledger";
import { duneDocument, readWhole } from "./testing/documents";
import type { Open } from "./testing/documents";

/** A document as the entries that a coordinator and teams would have made of it. */
function asLedger(document: Open): Ledger {
  const ledger = new Ledger();
  ledger.add("campaign.opened", {
    ledger: "weighhouse/3f1c",
    clock: "simulated",
    visibility: "public",
    ...document.campaign,
  });
  for (const one of document.observables) ledger.add("observable.declared", one);
  for (const one of document.measurands) ledger.add("measurand.declared", one);
  for (const one of document.derived) ledger.add("derived.declared", one);
  for (const one of document.sharedErrors) ledger.add("shared-error.declared", one);
  for (const one of document.facilities) ledger.add("facility.declared", one);
  for (const one of document.teams) ledger.add("team.joined", one);
  for (const { registeredAt, ...one } of document.hypotheses) {
    const claimed = { registeredAt, predictions: {} };
    ledger.add("hypothesis.registered", { ...one, claimed });
  }
  ledger.add("registration.closed", { by: "coordinator" });
  const measurements = document.measurements.map(({ postedAt = null, ...one }: Open) => ({
    ...one,
    claimed: postedAt === null ? null : { postedAt },
  }));
  const { correlations } = document;
  return ledger.add("measurements.posted", { measurements, correlations });
}

describe("the fold of the entries", () => {
  test("is exactly the document, with the ledger's times in place of claimed ones", () => {
    const ledger = asLedger(duneDocument());
    const times = new Map(ledger.records.map(({ kind, at }) => [kind, at]));
    const expected = duneDocument();
    expected.campaign.registrationCloses = times.get("registration.closed");
    for (const one of expected.measurements) one.postedAt = times.get("measurements.posted");
    const registered = ledger.records.filter(({ kind }) => kind === "hypothesis.registered");
    expected.hypotheses.forEach((one: Open, i: number) => (one.registeredAt = registered[i]!.at));
    const whole = readWhole(expected);
    expect(ledger.document).toEqual(whole);
    expect(JSON.stringify(ledger.document)).toBe(JSON.stringify(whole));
    expect(readWhole(ledger.document)).toEqual(whole);
  });

  test("as of any size is the fold of the entries before it", () => {
    const { records } = asLedger(duneDocument());
    const fold = new CampaignFold();
    records.forEach((record, seq) => {
      fold.apply(record);
      expect(fold.size).toBe(seq + 1);
      expect(fold.document()).toEqual(foldRecords(records.slice(0, seq + 1)));
    });
  });

  test("doesn't change what it was given, nor what it gave before", () => {
    const { records } = asLedger(duneDocument());
    const before = structuredClone(records);
    const fold = new CampaignFold();
    for (const record of records) fold.apply(record);
    const text = JSON.stringify(fold.document());
    fold.apply({
      ...records[0]!,
      kind: "measurement.set-aside",
      payload: { id: "south:1", reason: "a wet tray" },
    });
    expect(records).toEqual(before);
    expect(JSON.stringify(fold.document())).not.toBe(text);
    expect(JSON.stringify(foldRecords(records))).toBe(text);
  });

  test("comes from its parts in any grouping, in the order of their first put", () => {
    const fold = new CampaignFold();
    for (const record of asLedger(duneDocument()).records) fold.apply(record);
    const parts = fold.parts();
    const regrouped = [...parts.filter(({ part }) => part === "measurement"), ...parts];
    const once = regrouped.filter((one, index) => regrouped.indexOf(one) === index);
    expect(documentFromParts(once)).toEqual(fold.document());
  });
});

describe("campaign, measurands and measurements over time", () => {
  const opened = (registrationCloses = "2031-01-06T00:00:00Z") =>
    new Ledger()
      .add("campaign.opened", {
        ledger: "weighhouse/1",
        clock: "real",
        visibility: "public",
        key: "dune",
        title: "Dune",
        registrationCloses,
      })
      .add("observable.declared", { key: "pitch", title: "Pitch", unit: "Hz", scale: "linear" })
      .add("measurand.declared", {
        key: "crest",
        observable: "pitch",
        reference: { family: "uniform", lower: 0, upper: 200 },
      });

  test("closing brings the end of registration forward and never back", () => {
    const late = opened("2031-01-03T00:00:00Z")
      .bySystem()
      .add("registration.closed", { by: "clock" });
    expect(late.document.campaign.registrationCloses).toBe("2031-01-03T00:00:00Z");
    const amended = opened()
      .add("campaign.amended", {
        visibility: "public",
        key: "dune",
        title: "Dune, again",
        registrationCloses: "2031-02-01T00:00:00Z",
      })
      .add("registration.closed", { by: "coordinator" });
    expect(amended.document.campaign).toMatchObject({
      title: "Dune, again",
      registrationCloses: at(5),
    });
  });

  test("an amended campaign loses what its amendment leaves out, and keeps its ledger's id", () => {
    const fold = new CampaignFold();
    const { records } = opened().add("campaign.amended", {
      visibility: "members",
      key: "dune",
      title: "Dune",
    });
    for (const record of records) fold.apply(record);
    expect(fold.document().campaign.registrationCloses).toBeNull();
    expect(fold.parts()[0]!.content).toMatchObject({
      ledger: "weighhouse/1",
      clock: "real",
      visibility: "members",
    });
    expect(fold.document().campaign).not.toHaveProperty("ledger");
  });

  test("a measurand's first dates are the earliest ever, whatever comes after", () => {
    const post = (ledger: Ledger, id: string, observedAt: string | null) =>
      ledger.add("measurements.posted", {
        measurements: [{ id, measurand: "crest", value: 80, sd: 1, observedAt }],
      });
    const ledger = opened();
    post(ledger, "a", null);
    post(ledger, "b", "2031-01-02T00:00:00Z");
    post(ledger, "c", "2031-01-01T00:00:00Z");
    ledger.add("measurement.set-aside", { id: "c", reason: "a loose mast" });
    ledger.add("measurand.declared", {
      key: "crest",
      observable: "pitch",
      title: "Pitch at the crest",
      reference: { family: "uniform", lower: 0, upper: 200 },
    });
    expect(ledger.document.measurands[0]).toMatchObject({
      title: "Pitch at the crest",
      firstPostedAt: at(4),
      firstObservedAt: "2031-01-01T00:00:00Z",
    });
    expect(ledger.document.measurements[2]!.setAside).toEqual({ reason: "a loose mast" });
  });

  test("a closed measurand says why, and what stands in its place", () => {
    const ledger = opened().add("measurand.closed", { key: "crest", reason: "two crests" });
    expect(ledger.document.measurands[0]!.closed).toEqual({
      reason: "two crests",
      replacedBy: null,
    });
  });

  test("a change of what isn't there is an error that names it", () => {
    const ledger = opened().add("measurement.set-aside", { id: "nobody", reason: "?" });
    expect(() => ledger.document).toThrow(CampaignError);
    expect(() => ledger.document).toThrow(
      "entry 3, measurement.set-aside: /id: found nobody; allowed a measurement that is there",
    );
  });

  test("an entry of an unknown kind, or whose payload isn't one, is an error", () => {
    const record = { ...opened().records[0]!, kind: "campaign.imagined" as EntryKind };
    expect(() => changesOf(record, new Parts())).toThrow("entry 0: unknown kind campaign.imagined");
    const broken = { ...opened().records[1]!, payload: { key: "o" } };
    expect(() => changesOf(broken, new Parts())).toThrow(
      /entry 1, observable.declared:\n\/title: found nothing/,
    );
  });
});

describe("an amended hypothesis", () => {
  type Hypothesis = PayloadInput<"hypothesis.registered">;
  const first: Hypothesis = {
    key: "slip",
    title: "Slip",
    parameters: [
      { key: "f0", prior: { family: "normal", mean: 80, sd: 10 } },
      { key: "n", prior: { family: "uniform", lower: 1, upper: 2 } },
    ],
    tables: [{ key: "grid", in: ["slope"], at: [[0, 1]], values: [1, 2] }],
    ensemble: { columns: { d: [1, 2], g: [3, 4] } },
    predictions: [
      { measurand: "a", expected: "f0" },
      { measurand: "b", expected: "n * table(grid, 0.5)" },
      { measurand: "c", expected: "d + 1", tolerance: { family: "normal", sd: 1 } },
      { measurand: "d", expected: 3, tolerance: { family: "normal", sd: 1 } },
    ],
    toleranceCorrelations: [{ a: "c", b: "d", coefficient: 0.5 }],
  };

  /** The predictions that took the amendment's time. */
  function renewed(change: (hypothesis: Open) => void): string[] {
    const amended = structuredClone(first) as Open;
    change(amended);
    const ledger = new Ledger();
    ledger.add("campaign.opened", {
      ledger: "l",
      clock: "real",
      visibility: "public",
      key: "k",
      title: "t",
    });
    ledger.add("hypothesis.registered", first).add("hypothesis.amended", amended);
    const { registeredAt, predictions } = ledger.hypothesis("slip");
    expect(registeredAt).toBe(at(2));
    for (const one of predictions) expect([at(2), at(3)]).toContain(one.registeredAt);
    return predictions
      .filter((one) => one.registeredAt === at(3))
      .map(({ measurand }) => measurand);
  }

  test("keeps its own time, and that of every prediction that says the same", () => {
    const change = (hypothesis: Open) => {
      hypothesis.title = "Slip, said better";
      hypothesis.statement = "A layer slips.";
      hypothesis.weight = 2;
      hypothesis.predictions.reverse();
      hypothesis.parameters[0].title = "Tone";
      hypothesis.toleranceCorrelations = [{ b: "c", a: "d", coefficient: 0.5 }];
      hypothesis.predictions[0].decisive = false;
    };
    expect(renewed(change)).toEqual([]);
  });

  const changes: [what: string, change: (hypothesis: Open) => void, renewed: string[]][] = [
    ["another expected value", (one) => (one.predictions[3].expected = 4), ["d"]],
    ["another tolerance", (one) => (one.predictions[2].tolerance.sd = 2), ["c"]],
    ["a mark as decisive", (one) => (one.predictions[0].decisive = true), ["a"]],
    ["a new prediction", (one) => one.predictions.push({ measurand: "e", expected: 1 }), ["e"]],
    ["another prior", (one) => (one.parameters[0].prior.sd = 20), ["a"]],
    ["another table", (one) => (one.tables[0].values[1] = 3), ["b"]],
    ["another column in use", (one) => (one.ensemble.columns.d = [1, 3]), ["c"]],
    ["another column that nothing uses", (one) => (one.ensemble.columns.g = [1, 3]), []],
    ["other weights of rows", (one) => (one.ensemble.weights = [1, 2]), ["c"]],
    ["another correlation", (one) => (one.toleranceCorrelations[0].coefficient = 0.4), ["c", "d"]],
  ];
  test.each(changes)("%s takes the amendment's time", (_what, change, expected) => {
    expect(renewed(change)).toEqual(expected);
  });

  test("a prediction that was taken back and comes again has the later time", () => {
    const ledger = new Ledger()
      .add("campaign.opened", {
        ledger: "l",
        clock: "real",
        visibility: "public",
        key: "k",
        title: "t",
      })
      .add("hypothesis.registered", first)
      .add("hypothesis.amended", { ...first, predictions: [], toleranceCorrelations: [] })
      .add("hypothesis.amended", first);
    expect(ledger.hypothesis("slip").predictions.map((one) => one.registeredAt)).toEqual(
      Array.from({ length: 4 }, () => at(4)),
    );
  });
});

describe("dates in payloads", () => {
  const hypothesis = { key: "h", title: "H", predictions: [{ measurand: "m", expected: 1 }] };
  const measurement = { id: "a", measurand: "m", value: 1, sd: 1 };

  test.each([
    ["hypothesis.registered", { ...hypothesis, registeredAt: at(1) }, "", "registeredAt"],
    [
      "hypothesis.amended",
      { ...hypothesis, predictions: [{ ...hypothesis.predictions[0], registeredAt: at(1) }] },
      "/predictions/0",
      "registeredAt",
    ],
    [
      "measurements.posted",
      { measurements: [{ ...measurement, postedAt: at(1) }] },
      "/measurements/0",
      "postedAt",
    ],
    [
      "measurand.declared",
      { key: "m", observable: "o", firstPostedAt: at(1) },
      "",
      "firstPostedAt",
    ],
  ] as const)("%s refuses one of its own", (kind, payload, pointer, name) => {
    const read = readPayload(kind, payload);
    expect(read.ok ? [] : read.problems).toMatchObject([
      { pointer, code: "unknown-property", found: `the property "${name}"` },
    ]);
  });

  test("claimed ones are kept with the part and count for nothing", () => {
    const claimed = {
      registeredAt: "1999-01-01T00:00:00Z",
      predictions: { m: "1998-01-01T00:00:00Z" },
    };
    const ledger = new Ledger()
      .add("campaign.opened", {
        ledger: "l",
        clock: "real",
        visibility: "public",
        key: "k",
        title: "t",
      })
      .add("measurand.declared", {
        key: "m",
        observable: "o",
        claimed: { firstPostedAt: "1997-01-01T00:00:00Z" },
      })
      .add("hypothesis.registered", { ...hypothesis, claimed })
      .add("measurements.posted", {
        measurements: [{ ...measurement, claimed: { postedAt: "1996-01-01T00:00:00Z" } }],
      });
    const fold = new CampaignFold();
    for (const record of ledger.records) fold.apply(record);
    const contents = new Map(fold.parts().map(({ part, content }) => [part, content]));
    expect(contents.get("hypothesis")!["claimed"]).toEqual(claimed);
    expect(contents.get("measurement")!["claimed"]).toEqual({ postedAt: "1996-01-01T00:00:00Z" });
    const { hypotheses, measurands, measurements } = fold.document();
    expect(hypotheses[0]).toMatchObject({
      registeredAt: at(3),
      predictions: [{ registeredAt: at(3) }],
    });
    expect(measurands[0]!.firstPostedAt).toBe(at(4));
    expect(measurements[0]!.postedAt).toBe(at(4));
    expect(JSON.stringify(fold.document())).not.toContain("claimed");
  });
});

test("a payload has its defaults written out, and at most a thousand measurements", () => {
  const read = readPayload("measurements.posted", {
    measurements: [{ id: "a", measurand: "m", count: 2 }],
  });
  expect(read.ok && read.value).toMatchObject({
    measurements: [{ exposure: 1, background: 0, status: "final", unit: null, claimed: null }],
    correlations: [],
  });
  const many = Array.from({ length: 1001 }, (_, i) => ({ id: `m-${i}`, measurand: "m", count: 1 }));
  const refused = readPayload("measurements.posted", { measurements: many });
  expect(refused.ok ? [] : refused.problems).toMatchObject([
    { pointer: "/measurements", code: "out-of-range", found: "a list of 1001" },
  ]);
});
