import { describe } from "vitest";
import type { Open } from "../testing/documents";
import { NEW, add, check } from "../testing/refusals";

describe("keys", () => {
  check([
    [
      "an unknown measurand",
      add({ measurand: "grain", value: 1, sd: 1 }),
      [
        `${NEW}/measurand: found the unknown measurand grain; allowed pitch-curve, pitch-crest, grain-crest, grain-foot, ripple-crest, shimmer-noon, slide-april, booms-april`,
      ],
    ],
    [
      "a measurement of what is computed",
      add({ measurand: "grain-ratio", value: 1, sd: 1 }),
      [
        `${NEW}/measurand: found the derived value grain-ratio; allowed a measurand: derived values are computed`,
      ],
    ],
    [
      "an unknown facility, team and shared error",
      (document) =>
        Object.assign(document.measurements[0], {
          facility: "west",
          team: "x",
          shared: [{ error: "drift" }],
        }),
      [
        "/measurements/0/facility: found the unknown facility west; allowed north-mast, south-mast",
        "/measurements/0/team: found the unknown team x; allowed slip, echo",
        "/measurements/0/shared/0/error: found the unknown shared error drift; allowed tuning, night-zero",
      ],
    ],
    [
      "an unknown observable",
      (document) => (document.measurands[4].observable = "x"),
      [
        "/measurands/4/observable: found the unknown observable x; allowed pitch, grain, ripple, shimmer, slide, booms",
      ],
    ],
    [
      "unknown keys of a hypothesis",
      (document) => {
        document.hypotheses[1].team = "x";
        document.hypotheses[1].withheld = ["y"];
        document.hypotheses[1].predictions[4].measurand = "z";
        document.hypotheses[0].predictions[7].given.measurand = "w";
        document.hypotheses[0].toleranceCorrelations[0].b = "v";
      },
      [
        "/hypotheses/0/predictions/7/given/measurand: found the unknown measurand w; allowed pitch-curve, pitch-crest, grain-crest, grain-foot, ripple-crest, shimmer-noon, slide-april, booms-april",
        "/hypotheses/0/toleranceCorrelations/0/b: found the unknown prediction v; allowed pitch-curve, pitch-crest, grain-crest, grain-foot, ripple-crest, shimmer-noon, slide-april, booms-april",
        "/hypotheses/1/team: found the unknown team x; allowed slip, echo",
        "/hypotheses/1/withheld/0: found the unknown measurand y; allowed pitch-curve, pitch-crest, grain-crest, grain-foot, ripple-crest, shimmer-noon, slide-april, booms-april, grain-ratio",
        "/hypotheses/1/predictions/4/measurand: found the unknown measurand z; allowed pitch-curve, pitch-crest, grain-crest, grain-foot, ripple-crest, shimmer-noon, slide-april, booms-april, grain-ratio",
      ],
    ],
    [
      "an unknown measurement in a correlation",
      (document) => (document.correlations[0].b = "nobody:1"),
      [
        "/correlations/0/b: found the unknown measurement nobody:1; allowed the id of a measurement",
      ],
    ],
    [
      "an unknown replacement of a closed measurand",
      (document) => (document.measurands[4].closed = { reason: "twice", replacedBy: "x" }),
      [
        "/measurands/4/closed/replacedBy: found the unknown measurand x; allowed pitch-curve, pitch-crest, grain-crest, grain-foot, ripple-crest, shimmer-noon, slide-april, booms-april",
      ],
    ],
    [
      "an id twice",
      add({ id: "south:1", measurand: "pitch-crest", value: 80, sd: 1 }),
      [`${NEW}/id: found the id south:1 a second time; allowed each id once`],
    ],
    [
      "a key twice in every list",
      (document) => {
        document.observables[4].key = "booms";
        document.measurands[7].observable = "pitch";
        document.measurands.splice(6, 2);
        document.measurements.splice(12, 2);
        for (const { predictions } of document.hypotheses) {
          predictions.splice(
            0,
            9,
            ...predictions.filter(({ measurand }: Open) => !/april/.test(measurand)),
          );
        }
        document.facilities[1].key = "north-mast";
        document.teams.push({ key: "slip" });
        document.sharedErrors.push({ key: "tuning", sd: 1 });
        document.hypotheses[1].key = "slip-layer";
        document.derived[0].key = "grain-foot";
        document.hypotheses[1].predictions.splice(2, 1);
      },
      [
        "/observables/5/key: found the observable booms a second time; allowed each key once",
        "/derived/0/key: found the measurand or derived value grain-foot a second time; allowed each key once",
        "/sharedErrors/2/key: found the shared error tuning a second time; allowed each key once",
        "/facilities/1/key: found the facility north-mast a second time; allowed each key once",
        "/teams/2/key: found the team slip a second time; allowed each key once",
        "/hypotheses/1/key: found the hypothesis slip-layer a second time; allowed each key once",
      ],
    ],
    [
      "a key twice inside a part",
      (document) => {
        document.observables[0].conditions.push({ key: "slope" });
        document.measurands[1].thresholds.push({ key: "audible", value: 30 });
        document.hypotheses[0].parameters.push({ key: "f0", prior: { family: "fixed", value: 1 } });
        document.hypotheses[0].tables[1].key = "d";
        document.hypotheses[0].predictions[0].expected = "f0";
        document.measurements[0].shared.push({ error: "tuning" });
      },
      [
        "/observables/0/conditions/3/key: found the condition slope a second time; allowed each key once",
        "/measurands/1/thresholds/1/key: found the threshold audible a second time; allowed each key once",
        "/hypotheses/0/parameters/6/key: found the parameter f0 a second time; allowed each key once",
        "/hypotheses/0/tables/1/key: found the name d a second time; allowed each key once",
        "/measurements/0/shared/2/error: found the shared error tuning a second time; allowed each key once",
      ],
    ],
    [
      "keys of the wrong form",
      (document) => {
        document.facilities[1].key = "South Mast";
        document.hypotheses[0].parameters[1].key = "N";
        document.hypotheses[0].predictions[0].expected = "f0";
      },
      [
        '/facilities/1/key: found "South Mast"; allowed a key: 1 to 64 of a-z, 0-9 and -, starting with a letter or digit',
        '/hypotheses/0/parameters/1/key: found "N"; allowed a name for expressions: a small letter, then up to 31 of a-z, A-Z, 0-9 and _',
      ],
    ],
    [
      "a time with an offset, and one that no calendar has",
      (document) => {
        document.campaign.dataCloses = "2031-06-01T00:00:00+02:00";
        document.campaign.registrationCloses = "2031-02-29T00:00:00Z";
      },
      [
        '/campaign/registrationCloses: found "2031-02-29T00:00:00Z"; allowed an RFC 3339 time in UTC, such as 2031-03-01T00:00:00Z',
        '/campaign/dataCloses: found "2031-06-01T00:00:00+02:00"; allowed an RFC 3339 time in UTC, such as 2031-03-01T00:00:00Z',
      ],
    ],
    [
      "a member's name that is none, in records",
      (document) => {
        document.measurements[0].conditions["Slope!"] = 3;
        document.derived[0].from["Crest"] = "grain-crest";
      },
      [
        '/derived/0/from: found the member "Crest"; allowed as a member\'s name a name for expressions: a small letter, then up to 31 of a-z, A-Z, 0-9 and _',
        '/measurements/0/conditions: found the member "Slope!"; allowed as a member\'s name a name for expressions: a small letter, then up to 31 of a-z, A-Z, 0-9 and _',
      ],
    ],
  ]);
});
