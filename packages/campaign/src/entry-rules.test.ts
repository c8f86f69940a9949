import { describe, expect, test } from "vitest";
import { CampaignError } from "./campaign-error";
import { entryKinds } from "./entries";
import type { EntryKind, PayloadInput } from "./entries";
import { CampaignFold, foldRecords } from "./fold";
import {
  at,
  citationOf,
  Ledger,
  LEDGER_ID,
  measurandOf,
  NONCE,
  openedDune,
  reading,
  sealOf,
} from "./testing/ledger";

const ROOT = `${"A".repeat(43)}=`;
const until = "2031-01-20T00:00:00Z";
const prediction = { measurand: "foot", expected: 60, tolerance: { family: "normal", sd: 5 } };
const bound = { team: "grain", hypothesis: "slip", measurand: "foot" };
const { digest, opening } = sealOf(bound, prediction);
const seal = { digest, hypothesis: "slip", measurand: "foot", until, keeping: "held" } as const;
const hidden = reading("dish:1", { measurand: "foot" });
const data = sealOf({ team: "wind", hypothesis: null, measurand: "foot" }, hidden);
const dataSeal = { digest: data.digest, measurand: "foot", until, keeping: "kept" } as const;

/** With two measurements of the crest, and its own fault in what follows. */
function measured(): Ledger {
  const measurements = [reading("mast:1"), reading("mast:2", { value: 84 })];
  return openedDune().add("measurements.posted", {
    measurements,
    correlations: [{ a: "mast:1", b: "mast:2", coefficient: 0.5 }],
  });
}

const sealed = () => openedDune().by("grain").add("prediction.sealed", seal);
const sealedData = () => openedDune().by("wind").add("measurement.sealed", dataSeal);

/** One ledger with an entry of every kind. */
function everyKind(): Ledger {
  return measured()
    .add("campaign.amended", {
      key: "dune",
      title: "The dune hums",
      visibility: "public",
      registrationCloses: "2031-01-25T00:00:00Z",
    })
    .add("derived.declared", {
      key: "gap",
      observable: "pitch",
      expression: "a",
      from: { a: "foot" },
    })
    .add("shared-error.declared", { key: "zero", sd: 1 })
    .add("facility.declared", { key: "mast" })
    .by("grain")
    .add("measurand.proposed", { measurand: measurandOf("flank"), reason: "It hums there too." })
    .add("reference.objected", { measurand: "foot", reason: "Nobody hears below 20 Hz." })
    .add("prediction.sealed", seal)
    .add("prediction.revealed", opening)
    .by("wind")
    .add("measurement.sealed", dataSeal)
    .add("measurement.revealed", data.opening)
    .add("hypothesis.amended", {
      key: "flutter",
      title: "It flutters",
      team: "wind",
      predictions: [],
    })
    .add("hypothesis.retired", { key: "flutter", reason: "We don't believe it any more." })
    .add("measurement.corrected", { measurement: reading("mast:1", { value: 81 }), reason: "typo" })
    .add("measurement.set-aside", { id: "mast:2", reason: "fog" })
    .add("measurements.withdrawn", {
      selection: { by: "ids", ids: ["mast:2"] },
      reason: "another dune",
    })
    .by(null)
    .add("measurand.closed", { key: "foot", reason: "declared twice" })
    .add("remark.made", { on: 3, kind: "question", text: "Which crest?" })
    .add("standings.cited", citationOf(26))
    .bySystem()
    .add("registration.closed", { by: "clock" })
    .add("ledger.restored", { before: 31, root: ROOT, after: 28, reason: "a disk failed" });
}

describe("a ledger with every kind of entry", () => {
  test("folds, and every entry changes what there is", () => {
    const { records } = everyKind();
    expect(new Set(records.map(({ kind }) => kind))).toEqual(new Set(entryKinds));
    const fold = new CampaignFold();
    for (const record of records) {
      const before = JSON.stringify(fold.parts());
      fold.apply(record);
      expect(JSON.stringify(fold.parts()), `entry ${record.seq}`).not.toBe(before);
    }
  });

  test("gives a document that holds the newest of everything, and nothing that is only shown", () => {
    const { document } = everyKind();
    expect(document.measurements.map(({ id, value }) => [id, value])).toEqual([
      ["mast:1", 81],
      ["dish:1", 80],
    ]);
    expect(document.correlations).toEqual([]);
    expect(JSON.stringify(document)).not.toMatch(/retired|proposal|objection|remark|seal|cited/);
  });
});

type Broken = [rule: string, ledger: () => Ledger, reason: string];
const add =
  <K extends EntryKind>(ledger: () => Ledger, kind: K, payload: PayloadInput<K>) =>
  () =>
    ledger().add(kind, payload);

const amended = { key: "dune", title: "Dune", visibility: "public" } as const;
const closes = "2031-01-25T00:00:00Z";
const slip: PayloadInput<"hypothesis.amended"> = {
  key: "slip",
  title: "Slip",
  team: "grain",
  predictions: [],
};

const broken: Broken[] = [
  [
    "a campaign is opened once",
    add(openedDune, "campaign.opened", { ...amended, ledger: "l", clock: "real" }),
    "(document): found campaign.opened; allowed campaign.opened first, and there only",
  ],
  [
    "nothing stands before the opening",
    add(() => new Ledger(), "team.joined", { key: "t" }),
    "(document): found team.joined; allowed campaign.opened first, and there only",
  ],
  [
    "a campaign's key never changes",
    add(openedDune, "campaign.amended", { ...amended, key: "other", registrationCloses: closes }),
    '/key: found other; allowed "dune": keys never change',
  ],
  [
    "the rule doesn't change after the first measurement",
    add(measured, "campaign.amended", {
      ...amended,
      registrationCloses: closes,
      rule: { coverage: 3 },
    }),
    "/rule: found",
  ],
  [
    "registration that has closed opens no more",
    add(() => openedDune().add("registration.closed", { by: "coordinator" }), "campaign.amended", {
      ...amended,
      registrationCloses: closes,
    }),
    "registration is closed",
  ],
  [
    "a reference doesn't change after a measurement",
    add(measured, "measurand.declared", {
      ...measurandOf("crest"),
      reference: { family: "uniform", lower: 0, upper: 100 },
    }),
    "/reference: found",
  ],
  [
    "a scatter doesn't change after a measurement",
    add(measured, "measurand.declared", { ...measurandOf("crest"), scatter: 2 }),
    "/scatter: found 2; allowed 0, as it was declared",
  ],
  [
    "thresholds don't change after a measurement",
    add(measured, "measurand.declared", { ...measurandOf("crest"), thresholds: [] }),
    "/thresholds: found []",
  ],
  [
    "nor after a measurement that was withdrawn",
    add(
      () =>
        measured().add("measurements.withdrawn", {
          selection: { by: "facility", facility: "mast" },
          reason: "wrong dune",
        }),
      "measurand.declared",
      { ...measurandOf("crest"), scatter: 2 },
    ),
    "/scatter: found 2",
  ],
  [
    "another declaration never takes a key",
    add(openedDune, "observable.declared", {
      key: "pitch",
      title: "P",
      unit: "kHz",
      scale: "linear",
    }),
    '/unit: found "kHz"; allowed "Hz", as it was declared',
  ],
  [
    "measurands and derived values share one list of keys",
    add(openedDune, "derived.declared", {
      key: "crest",
      observable: "pitch",
      expression: "a",
      from: { a: "foot" },
    }),
    "/key: found crest; allowed a key that no measurand has",
  ],
  [
    "a measurand closes once",
    add(
      () => openedDune().add("measurand.closed", { key: "foot", reason: "twice" }),
      "measurand.closed",
      { key: "foot", reason: "again" },
    ),
    "/key: found foot, which is closed already",
  ],
  [
    "what replaces a measurand is declared",
    add(openedDune, "measurand.closed", { key: "foot", reason: "r", replacedBy: "toe" }),
    "/replacedBy: found the unknown measurand toe",
  ],
  [
    "a proposal is a team's",
    add(openedDune, "measurand.proposed", { measurand: measurandOf("flank"), reason: "r" }),
    "allowed one by a team's member",
  ],
  [
    "what is declared is not proposed",
    add(() => openedDune().by("wind"), "measurand.proposed", {
      measurand: measurandOf("foot"),
      reason: "r",
    }),
    "/measurand/key: found foot",
  ],
  [
    "an objection comes before registration closes",
    add(
      () => openedDune().add("registration.closed", { by: "coordinator" }).by("wind"),
      "reference.objected",
      { measurand: "foot", reason: "r" },
    ),
    "allowed one before registration's close",
  ],
  [
    "a hypothesis's key is its own",
    add(() => openedDune().by("grain"), "hypothesis.registered", slip),
    "/key: found slip; allowed a key that no hypothesis has",
  ],
  [
    "a team registers in its own name",
    add(() => openedDune().by("wind"), "hypothesis.registered", { ...slip, key: "creep" }),
    "/team: found grain; allowed wind",
  ],
  [
    "a hypothesis is amended by its own team",
    add(() => openedDune().by("wind"), "hypothesis.amended", slip),
    "/key: found slip by team wind; allowed by its own team, grain",
  ],
  [
    "nor by the system",
    add(() => openedDune().bySystem(), "hypothesis.amended", slip),
    "/key: found slip by the system",
  ],
  [
    "a hypothesis stays its team's",
    add(() => openedDune().by("grain"), "hypothesis.amended", { ...slip, team: "wind" }),
    "/team: found wind; allowed grain, as it was",
  ],
  [
    "a hypothesis is retired by its own team",
    add(() => openedDune().by("wind"), "hypothesis.retired", { key: "slip", reason: "r" }),
    "/key: found slip by team wind",
  ],
  [
    "a retired hypothesis is amended no more",
    add(
      () => openedDune().by("grain").add("hypothesis.retired", { key: "slip", reason: "r" }),
      "hypothesis.amended",
      slip,
    ),
    "/key: found slip, which is retired",
  ],
  [
    "only a seal withholds",
    add(() => openedDune().by("grain"), "hypothesis.amended", { ...slip, withheld: ["crest"] }),
    "/withheld/0: found crest; allowed what was withheld before",
  ],
  [
    "what is sealed is not predicted openly",
    add(sealed, "hypothesis.amended", { ...slip, predictions: [prediction] as never }),
    "/predictions/0: found a prediction of foot, which is sealed",
  ],
  [
    "what is predicted openly is not sealed",
    add(() => openedDune().by("grain"), "prediction.sealed", { ...seal, measurand: "crest" }),
    "/measurand: found crest, which it predicts or withholds already",
  ],
  [
    "a prediction is sealed by its hypothesis's team",
    add(() => openedDune().by("wind"), "prediction.sealed", seal),
    "/hypothesis: found slip by team wind",
  ],
  [
    "a digest is sealed once",
    add(sealed, "prediction.sealed", { ...seal, measurand: "crest" }),
    "/digest: found",
  ],
  [
    "a seal ends after it begins",
    add(() => openedDune().by("grain"), "prediction.sealed", { ...seal, until: at(9) }),
    "/until: found",
  ],
  [
    "a seal isn't opened with other content",
    add(sealed, "prediction.revealed", { ...opening, content: { ...prediction, expected: 61 } }),
    "/content: found content, nonce and seal of digest",
  ],
  [
    "a seal isn't opened with another nonce",
    add(sealed, "prediction.revealed", { ...opening, nonce: "00".repeat(32) }),
    "/content: found content, nonce and seal of digest",
  ],
  [
    "a seal isn't opened by another team",
    add(() => sealed().by("wind"), "prediction.revealed", opening),
    "found an opening by team wind; allowed one by team grain, who sealed it",
  ],
  [
    "a rival who copied a digest can't use its opening",
    add(
      () =>
        openedDune()
          .by("wind")
          .add("prediction.sealed", { ...seal, hypothesis: "flutter" }),
      "prediction.revealed",
      opening,
    ),
    "/content: found content, nonce and seal of digest",
  ],
  [
    "a seal is opened once",
    add(() => sealed().add("prediction.revealed", opening), "prediction.revealed", opening),
    "/digest: found a seal that is open already",
  ],
  [
    "a seal of a measurement opens as no prediction",
    add(sealedData, "prediction.revealed", { ...opening, digest: data.digest }),
    "allowed the digest of a sealed prediction",
  ],
  [
    "the system opens nothing before its time",
    add(() => sealed().bySystem(), "prediction.revealed", opening),
    "found the system's opening at",
  ],
  [
    "a kept seal isn't opened after its time",
    () => {
      const ledger = openedDune().by("wind");
      ledger.add("measurement.sealed", { ...dataSeal, until: at(10) });
      ledger.by(null).add("facility.declared", { key: "mast" }).by("wind");
      return ledger.add("measurement.revealed", data.opening);
    },
    "allowed one until 2031-01-10",
  ],
  [
    "a sealed content is a prediction",
    () => {
      const other = sealOf(bound, { measurand: "foot", hoped: 3 });
      const ledger = openedDune().by("grain");
      ledger.add("prediction.sealed", { ...seal, digest: other.digest });
      return ledger.add("prediction.revealed", other.opening);
    },
    '/content: found the property "hoped"',
  ],
  [
    "who holds a sealed measurement files no prediction of it",
    add(sealedData, "hypothesis.amended", {
      key: "flutter",
      title: "Flutter",
      team: "wind",
      predictions: [prediction] as never,
    }),
    "/predictions/0: found a prediction of foot by those who sealed a measurement of it",
  ],
  [
    "nor a sealed one",
    add(sealedData, "prediction.sealed", {
      ...seal,
      hypothesis: "flutter",
      digest: sealOf({ ...bound, team: "wind", hypothesis: "flutter" }, prediction).digest,
    }),
    "/measurand: found foot, by those who sealed a measurement of it",
  ],
  [
    "registration closes once",
    add(
      () => openedDune().add("registration.closed", { by: "coordinator" }),
      "registration.closed",
      {
        by: "coordinator",
      },
    ),
    "found registration closed since",
  ],
  [
    "the clock closes registration at its date",
    add(() => openedDune().bySystem(), "registration.closed", { by: "clock" }),
    "/by: found the clock's closing at",
  ],
  [
    "an id is posted once",
    add(measured, "measurements.posted", { measurements: [reading("mast:1")] }),
    "/measurements/0/id: found mast:1; allowed an id that was never posted",
  ],
  [
    "a withdrawn id doesn't come back",
    add(
      () =>
        measured().add("measurements.withdrawn", {
          selection: { by: "ids", ids: ["mast:1"] },
          reason: "r",
        }),
      "measurements.posted",
      { measurements: [reading("mast:1", { value: 3 })] },
    ),
    "/measurements/0/id: found mast:1",
  ],
  [
    "a measurement is of a declared measurand",
    add(openedDune, "measurements.posted", { measurements: [reading("m", { measurand: "toe" })] }),
    "/measurements/0/measurand: found the unknown measurand toe",
  ],
  [
    "a correlation is of measurements that are there",
    add(openedDune, "measurements.posted", {
      measurements: [reading("mast:1")],
      correlations: [{ a: "mast:1", b: "mast:9", coefficient: 0.5 }],
    }),
    "/correlations/0/b: found mast:9",
  ],
  [
    "what is corrected is there",
    add(measured, "measurement.corrected", { measurement: reading("mast:9"), reason: "r" }),
    "/measurement/id: found mast:9; allowed a measurement that is there",
  ],
  [
    "what is withdrawn is there",
    add(measured, "measurements.withdrawn", {
      selection: { by: "ids", ids: ["mast:1", "mast:9"] },
      reason: "r",
    }),
    "/selection/ids/1: found mast:9",
  ],
  [
    "a withdrawal by range selects something",
    add(measured, "measurements.withdrawn", {
      selection: { by: "facility", facility: "mast", from: "2031-01-03T00:00:00Z" },
      reason: "r",
    }),
    "/selection: found no measurement",
  ],
  [
    "a measurement is set aside once",
    add(
      () => measured().add("measurement.set-aside", { id: "mast:1", reason: "fog" }),
      "measurement.set-aside",
      { id: "mast:1", reason: "fog" },
    ),
    "/id: found mast:1, which is set aside already",
  ],
  [
    "a remark is on an earlier entry",
    add(openedDune, "remark.made", { on: 8, kind: "question", text: "?" }),
    "/on: found 8; allowed an earlier entry, below 8",
  ],
  [
    "standings are cited as of the size before their entry",
    add(openedDune, "standings.cited", citationOf(7)),
    "/standings: found",
  ],
  [
    "a citation's code is made of the standings",
    add(openedDune, "standings.cited", { ...citationOf(8), code: "00000000" }),
    "/code: found 00000000",
  ],
  [
    "a restored ledger goes on from the size that it came back with",
    add(() => openedDune().bySystem(), "ledger.restored", {
      before: 31,
      root: ROOT,
      after: 9,
      reason: "a disk failed",
    }),
    "/after: found 9; allowed 8, the size before this entry",
  ],
  [
    "a restore is declared by who runs the installation",
    add(openedDune, "ledger.restored", {
      before: 31,
      root: ROOT,
      after: 8,
      reason: "a disk failed",
    }),
    "found a member's entry",
  ],
];

describe("an entry that breaks a rule is refused with its seq and the reason", () => {
  test.each(broken)("%s", (_rule, ledger, reason) => {
    const { records } = ledger();
    const last = records.at(-1)!;
    // All that stands before it is good.
    const fold = new CampaignFold();
    for (const record of records.slice(0, -1)) fold.apply(record);
    const before = JSON.stringify(fold.parts());
    const start = `entry ${last.seq}, ${last.kind}: `;
    expect(() => fold.apply(last)).toThrow(CampaignError);
    expect(() => fold.apply(last)).toThrow(start);
    expect(() => fold.apply(last)).toThrow(reason);
    expect(JSON.stringify(fold.parts())).toBe(before);
    expect(() => foldRecords(records)).toThrow(reason);
  });
});

describe("a measurand before its first measurement", () => {
  test("may be put right", () => {
    const ledger = openedDune().add("measurand.declared", {
      ...measurandOf("crest"),
      scatter: 2,
      reference: { family: "normal", mean: 80, sd: 30 },
    });
    expect(ledger.measurand("crest")).toMatchObject({ scatter: 2, reference: { mean: 80 } });
  });
});

describe("a withdrawal", () => {
  const post = (ledger: Ledger, id: string, observedAt: string | null, facility = "mast") =>
    ledger.add("measurements.posted", { measurements: [reading(id, { observedAt, facility })] });

  test("of a facility's range takes what lies in it, ends included, and no other", () => {
    const ledger = openedDune();
    post(ledger, "before", "2031-01-01T23:59:59.999Z");
    post(ledger, "first", "2031-01-02T00:00:00.000Z");
    post(ledger, "last", "2031-01-03T00:00:00Z");
    post(ledger, "after", "2031-01-03T00:00:00.000001Z");
    post(ledger, "undated", null);
    post(ledger, "elsewhere", "2031-01-02T12:00:00Z", "dish");
    ledger.add("measurements.withdrawn", {
      selection: {
        by: "facility",
        facility: "mast",
        from: "2031-01-02T00:00:00Z",
        to: "2031-01-03T00:00:00Z",
      },
      reason: "the microphone was covered",
    });
    const ids = ["before", "after", "undated", "elsewhere"];
    expect(ledger.document.measurements.map(({ id }) => id)).toEqual(ids);
    post(ledger, "later", "2031-01-02T12:00:00Z");
    expect(ledger.measurement("later")).toBeDefined();
  });

  test("leaves the document as if it had never been posted, but for the measurand's first dates", () => {
    const never = openedDune();
    const withdrawn = measured().add("measurements.withdrawn", {
      selection: { by: "ids", ids: ["mast:1", "mast:2"] },
      reason: "another dune",
    });
    const { measurands, ...rest } = withdrawn.document;
    const { measurands: expected, ...others } = never.document;
    expect(rest).toEqual(others);
    expect(measurands).toEqual([
      { ...expected[0], firstPostedAt: at(9), firstObservedAt: "2031-01-02T00:00:00Z" },
      expected[1],
    ]);
  });
});

describe("a correction", () => {
  test("gives the document the new content, and the measurand the earliest date that it ever had", () => {
    const ledger = measured()
      .add("measurement.set-aside", { id: "mast:1", reason: "fog" })
      .add("measurement.corrected", {
        measurement: reading("mast:1", { value: 71, observedAt: "2031-01-01T06:00:00Z" }),
        reason: "a wrong column",
      })
      .add("measurement.corrected", {
        measurement: reading("mast:1", { value: 72, observedAt: "2031-01-05T06:00:00Z" }),
        reason: "the right one",
      });
    expect(ledger.measurement("mast:1")).toMatchObject({
      value: 72,
      observedAt: "2031-01-05T06:00:00Z",
      postedAt: at(9),
      setAside: { reason: "fog" },
    });
    expect(ledger.measurand("crest")).toMatchObject({
      firstPostedAt: at(9),
      firstObservedAt: "2031-01-01T06:00:00Z",
    });
  });

  test("that moves it to another measurand dates that one from its posting", () => {
    const ledger = measured().add("measurement.corrected", {
      measurement: reading("mast:1", { measurand: "foot" }),
      reason: "it was the foot",
    });
    expect(ledger.measurand("foot").firstPostedAt).toBe(at(9));
    expect(ledger.measurand("crest").firstPostedAt).toBe(at(9));
  });
});

describe("a sealed prediction", () => {
  test("is withheld until it is opened, and counts from when it was sealed", () => {
    const ledger = sealed();
    expect(ledger.hypothesis("slip")).toMatchObject({ withheld: ["foot"] });
    expect(ledger.hypothesis("slip").predictions).toHaveLength(1);
    expect(JSON.stringify(ledger.document)).not.toContain("60");
    ledger.add("prediction.revealed", opening);
    expect(ledger.hypothesis("slip").withheld).toEqual([]);
    expect(ledger.hypothesis("slip").predictions[1]).toMatchObject({
      ...prediction,
      decisive: false,
      registeredAt: at(9),
    });
  });

  test("stays withheld through an amendment that says nothing of it", () => {
    const ledger = sealed().add("hypothesis.amended", slip);
    expect(ledger.hypothesis("slip").withheld).toEqual(["foot"]);
    ledger.add("prediction.revealed", opening).add("hypothesis.amended", {
      ...slip,
      predictions: [prediction] as never,
    });
    expect(ledger.hypothesis("slip").predictions[0]!.registeredAt).toBe(at(9));
  });

  test("counts from a later change of the prior that it hangs on", () => {
    const content = { measurand: "foot", expected: "f0 / 2" };
    const other = sealOf(bound, content);
    const sealing = { ...seal, digest: other.digest };
    const parameters = [{ key: "f0", prior: { family: "normal", mean: 70, sd: 10 } }] as const;
    const amendment = { ...slip, parameters: [...parameters] };
    const opened = (ledger: Ledger) =>
      ledger.add("prediction.revealed", other.opening).hypothesis("slip").predictions.at(-1)!;
    const before = openedDune().by("grain").add("hypothesis.amended", amendment);
    expect(opened(before.add("prediction.sealed", sealing)).registeredAt).toBe(at(10));
    const after = openedDune().by("grain").add("prediction.sealed", sealing);
    expect(opened(after.add("hypothesis.amended", amendment)).registeredAt).toBe(at(10));
  });

  test("that is held is opened by the system from its time on, however late", () => {
    const ledger = openedDune()
      .by("grain")
      .add("prediction.sealed", { ...seal, until: "2031-01-10T00:00:00Z" })
      .bySystem()
      .add("prediction.revealed", opening);
    expect(ledger.hypothesis("slip").predictions.at(-1)).toMatchObject({ registeredAt: at(9) });
  });
});

describe("a sealed measurement", () => {
  test("is absent until it is opened, and is posted then", () => {
    const ledger = sealedData();
    expect(ledger.document.measurements).toEqual([]);
    expect(ledger.measurand("foot").firstPostedAt).toBeNull();
    ledger.add("measurement.revealed", data.opening);
    expect(ledger.measurement("dish:1")).toMatchObject({ postedAt: at(10), team: "wind" });
    expect(ledger.measurand("foot").firstPostedAt).toBe(at(10));
  });

  test("of a member of no team is opened by that member alone", () => {
    const own = sealOf({ team: null, hypothesis: null, measurand: "foot" }, hidden);
    const ledger = () =>
      openedDune()
        .by(null, "ann")
        .add("measurement.sealed", { ...dataSeal, digest: own.digest });
    const opened = ledger().add("measurement.revealed", own.opening);
    expect(opened.measurement("dish:1")).toBeDefined();
    const other = ledger().by(null, "ben").add("measurement.revealed", own.opening);
    expect(() => other.document).toThrow("who sealed it");
  });
});

test("the ledger that a seal is bound to is that of entry 0", () => {
  expect(LEDGER_ID).toBe((openedDune().records[0]!.payload as { ledger: string }).ledger);
  expect(NONCE).toHaveLength(64);
});
