import { assert, constantFrom, property } from "fast-check";
import { describe, expect, test } from "vitest";
import { campaignDocumentSchema } from "./document";
import { problemLine } from "./problem";
import { readCampaign, readCampaignText } from "./read";
import { duneDocument, junk, placesOf, problemsAfter, put, readWhole } from "./testing/documents";
import type { Open } from "./testing/documents";

describe("a right document", () => {
  test("with every kind of part is read whole", () => {
    const read = readCampaign(duneDocument());
    expect(read.ok ? [] : read.problems.map(problemLine)).toEqual([]);
  });

  test("read again gives the same, and stays as it was", () => {
    const once = readWhole(duneDocument());
    const text = JSON.stringify(once);
    expect(JSON.stringify(readWhole(once))).toBe(text);
    expect(JSON.stringify(once)).toBe(text);
    const given = duneDocument();
    readWhole(given);
    expect(given).toEqual(duneDocument());
  });

  test("of the required fields alone is whole", () => {
    const document = readWhole({
      format: "weighhouse-campaign/1",
      campaign: { key: "bare", title: "Bare" },
    });
    expect(document.measurements).toEqual([]);
    expect(document.hypotheses).toEqual([]);
  });

  test("null in an optional field is as if the field weren't there", () => {
    const whole = duneDocument();
    const withNulls = nullsFor(campaignDocumentSchema.parse(whole), whole);
    expect(JSON.stringify(withNulls)).toContain("null");
    expect(readWhole(withNulls)).toEqual(readWhole(whole));
  });
});

/** The document as given, with a null for every field that it leaves out. */
function nullsFor(read: Open, given: Open): Open {
  if (Array.isArray(given)) return given.map((item, index) => nullsFor(read[index], item));
  if (typeof given !== "object" || given === null) return given;
  const isRecord = Object.keys(read).every((name) => name in given);
  const filled: Open = {};
  for (const name of Object.keys(read)) {
    if (name in given) filled[name] = nullsFor(read[name], given[name]);
    else if (!isRecord) filled[name] = null;
  }
  return filled;
}

describe("defaults (the table of the campaign format)", () => {
  const document = readWhole(duneDocument());
  const first = document.measurements[0]!;
  const [slip, air] = document.hypotheses;

  test("rule and none of these", () => {
    expect(document.campaign.rule).toEqual({ coverage: 2, pass: 0.95, fail: 0.05 });
    expect(document.campaign.noneOfThese).toEqual({ weight: 0 });
  });

  test("a title is its key", () => {
    expect(document.measurands[0]!.title).toBe("pitch-curve");
    expect(document.observables[0]!.conditions[0]!.title).toBe("slope");
    expect(slip!.parameters[0]!.title).toBe("f0");
    expect(document.sharedErrors[0]!.title).toBe("tuning");
    expect(document.facilities[0]!.title).toBe("north-mast");
    expect(document.teams[0]!.title).toBe("slip");
    expect(document.derived[0]!.title).toBe("grain-ratio");
  });

  test("shape, scatter, window and where of a measurand", () => {
    const grain = document.measurands[2]!;
    expect(grain).toMatchObject({ shape: "constant", scatter: 0, where: {}, closed: null });
    expect(grain.window).toEqual({ from: null, to: null });
    expect(grain.reference!.scatter).toBe(0);
  });

  test("weight, coefficient, sharing, decisive", () => {
    expect(slip!.weight).toBe(1);
    expect(first.shared[0]).toEqual({ error: "tuning", coefficient: 1 });
    expect(slip!.predictions[1]!.tolerance).toMatchObject({ sharing: "common", relative: false });
    expect(slip!.predictions[1]!.decisive).toBe(false);
  });

  test("an expectation without a tolerance is exact", () => {
    expect(air!.predictions[2]).toMatchObject({ expected: 1.5, tolerance: null });
  });

  test("a measurement's unit is its observable's; an event has none", () => {
    expect(document.measurements[2]!.unit).toBe("mm");
    expect(document.measurements[5]!.unit).toBe("um");
    expect(document.measurements[12]!.unit).toBeNull();
  });

  test("shared errors are absolute, and one draw for all", () => {
    expect(document.sharedErrors).toMatchObject([
      { relative: true, per: null },
      { relative: false, per: "batch" },
    ]);
  });

  test("efficiency and false alarm belong to events, exposure and background to counts", () => {
    const bare = duneDocument();
    bare.measurements[12] = { id: "a", measurand: "slide-april", occurred: false };
    bare.measurements[13] = { id: "b", measurand: "booms-april", count: 0 };
    const { measurements } = readWhole(bare);
    expect(measurements[12]).toMatchObject({ efficiency: 1, falseAlarm: 0, exposure: null });
    expect(measurements[13]).toMatchObject({ exposure: 1, background: 0, efficiency: null });
    expect(first).toMatchObject({ efficiency: null, exposure: null, status: "final" });
  });

  test("a derived value is scored where no hypothesis predicts an input of it", () => {
    expect(document.derived[0]!.scored).toBe(false);
    const other = duneDocument();
    for (const hypothesis of other.hypotheses) {
      hypothesis.predictions = hypothesis.predictions.filter(
        ({ measurand }: Open) => !measurand.startsWith("grain-"),
      );
      hypothesis.toleranceCorrelations = [];
    }
    expect(readWhole(other).derived[0]!.scored).toBe(true);
    other.derived[0].scored = false;
    expect(readWhole(other).derived[0]!.scored).toBe(false);
  });

  test("a prediction was registered with its hypothesis, a measurement posted when observed", () => {
    expect(slip!.predictions[0]!.registeredAt).toBe("2031-02-10T09:00:00Z");
    expect(document.measurements[1]!.postedAt).toBe("2031-03-05T00:00:00Z");
    expect(document.measurements[2]!.postedAt).toBeNull();
  });

  test("a measurand's first dates are the earliest of its measurements, set aside included", () => {
    const dated = duneDocument();
    dated.measurements[5].observedAt = "2031-05-01T00:00:00.5Z";
    dated.measurements[14].observedAt = "2031-05-01T00:00:00.25Z";
    dated.measurements[14].postedAt = "2031-05-03T00:00:00Z";
    const { measurands } = readWhole(dated);
    expect(measurands[3]).toMatchObject({
      firstObservedAt: "2031-05-01T00:00:00.25Z",
      firstPostedAt: "2031-05-01T00:00:00.5Z",
    });
    dated.measurands[3].firstPostedAt = "2031-04-01T00:00:00Z";
    expect(readWhole(dated).measurands[3]!.firstPostedAt).toBe("2031-04-01T00:00:00Z");
  });

  test("conditions from time are filled from the epoch and from the table", () => {
    // 10.5 days after the epoch; 20 + (40 - 20) x 10.5/31 in the table.
    expect(first.conditions["slope"]).toBe(31);
    expect(first.conditions["day"]).toBe(10.5);
    expect(first.conditions["humidity"]).toBeCloseTo(20 + (20 * 10.5) / 31, 12);
  });
});

describe("all errors come at once", () => {
  test("of form and of fit, in the same part and in different ones", () => {
    const problems = problemsAfter((document) => {
      document.campaign.motto = "sing";
      document.observables[3].scale = "loud";
      document.measurands[2].observable = "gravel";
      document.hypotheses[0].predictions[6].probability = 1;
      document.hypotheses[1].predictions[4].expected = "3 +";
      document.measurements[0].sd = -1;
      document.measurements[0].measurand = "nothing";
      document.measurements[1].id = "not an id";
      document.measurements[1].observedAt = "2032-01-01T00:00:00Z";
      document.correlations[0].a = "south:77";
    });
    expect(problems.map(({ pointer, code }) => [pointer, code]).sort()).toEqual(
      [
        ["/campaign", "unknown-property"],
        ["/observables/3/scale", "bad-choice"],
        ["/measurands/2/observable", "unknown-key"],
        ["/hypotheses/0/predictions/6/probability", "out-of-range"],
        ["/hypotheses/1/predictions/4/expected", "bad-expression"],
        ["/measurements/0/sd", "out-of-range"],
        ["/measurements/0/measurand", "unknown-key"],
        ["/measurements/1/id", "bad-format"],
        ["/measurements/1/observedAt", "outside-window"],
        // Its table of humidities ends with the window.
        ["/measurements/1/observedAt", "outside-condition"],
        ["/correlations/0/a", "unknown-key"],
      ].sort(),
    );
  });

  test("whatever stands at one place, that place (or its holder) is complained of", () => {
    assert(
      property(constantFrom(...placesOf(duneDocument())), junk, (path, value) => {
        const document = put(duneDocument(), path, value);
        const read = readCampaign(document);
        if (read.ok) return;
        for (const { pointer, found, allowed } of read.problems) {
          expect(pointer === "" || pointer.startsWith("/")).toBe(true);
          expect(found.length * allowed.length).toBeGreaterThan(0);
        }
        const schemaSays = campaignDocumentSchema.safeParse(document);
        if (schemaSays.success) return;
        const wrong = `/${path.join("/")}`;
        const near = read.problems.filter(
          ({ pointer }) =>
            pointer === wrong || pointer.startsWith(`${wrong}/`) || wrong.startsWith(`${pointer}/`),
        );
        expect(near.length).toBeGreaterThan(0);
      }),
      { numRuns: 500 },
    );
  });
});

describe("what is no campaign document at all", () => {
  test.each([[null], [3], ["text"], [[]], [true]])("%j", (value) => {
    const read = readCampaign(value);
    expect(read.ok ? [] : read.problems.map(({ pointer }) => pointer)).toEqual([""]);
  });

  test("measurements that are no list", () => {
    expect(problemsAfter((document) => (document.measurements = { a: 1 }))).toMatchObject([
      { pointer: "/measurements", code: "wrong-type", found: "an object" },
      { pointer: "/correlations/0/a", code: "unknown-key" },
      { pointer: "/correlations/0/b", code: "unknown-key" },
    ]);
  });
});

describe("text", () => {
  test("is read like its value", () => {
    const read = readCampaignText(JSON.stringify(duneDocument()));
    expect(read.ok && read.value).toEqual(readWhole(duneDocument()));
  });

  test("a syntax error is told with line and column", () => {
    const read = readCampaignText('{\n  "format": "weighhouse-campaign/1",\n  "campaign" 3\n}');
    expect(read).toEqual({
      ok: false,
      problems: [
        {
          pointer: "",
          code: "syntax",
          found: '"3" at line 3, column 14',
          allowed: ": after the member's name",
        },
      ],
    });
  });

  test("a member that stands twice is told beside what else is wrong", () => {
    const text = JSON.stringify(duneDocument()).replace(
      '"value":81,',
      '"value":81,"value":82,"colour":"red",',
    );
    const read = readCampaignText(text);
    expect(read.ok ? [] : read.problems.map(problemLine)).toEqual([
      '/measurements/0: found the member "value" a second time; allowed each member once',
      expect.stringMatching(
        /^\/measurements\/0: found the property "colour"; allowed id, measurand/,
      ),
    ]);
  });

  test("a member named __proto__ is refused, not swallowed", () => {
    const text = JSON.stringify(duneDocument()).replace(
      '"value":81,',
      '"value":81,"__proto__":{},',
    );
    const read = readCampaignText(text);
    expect(read.ok ? [] : read.problems[0]).toMatchObject({
      pointer: "/measurements/0",
      code: "unknown-property",
      found: 'the property "__proto__"',
    });
  });
});
