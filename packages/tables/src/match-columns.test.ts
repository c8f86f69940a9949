import { describe, expect, test } from "vitest";
import { matchColumns } from "./match-columns";
import { plainColumn } from "./raw-table";
import { manyQuantities, oneQuantity, readDrafts } from "./testing/harbour";

const fields = (header: string, row: string, options: Parameters<typeof readDrafts>[1] = {}) =>
  readDrafts(`${header}\n${row}\n`, options).matches.map(({ field }) => field);
const one = (header: string, row: string, options: Parameters<typeof readDrafts>[1] = {}) => {
  const read = readDrafts(`${header}\n${row}\n`, options);
  expect(read.problems).toEqual([]);
  return read.rows[0];
};

describe("an uncertainty's column is paired with its value's, in the forms of common practice", () => {
  test.each([
    ["flux,e_flux", ["value", "sd"]],
    ["flux,flux_err", ["value", "sd"]],
    ["flux,err_flux", ["value", "sd"]],
    ["flux,sigma_flux", ["value", "sd"]],
    ["flux,flux_error", ["value", "sd"]],
    ["FLUX,FLUXERR", ["value", "sd"]],
    ["flux,fluxErr", ["value", "sd"]],
    ["Flux,σ Flux", ["value", "sd"]],
    ["flux,flux unc", ["value", "sd"]],
    ["value,value_uncertainty", ["value", "sd"]],
    // VizieR: capital and small letter are the upper and the lower one where there are both.
    ["flux,E_flux,e_flux", ["value", "plus", "minus"]],
    ["flux,e_flux,E_flux", ["value", "minus", "plus"]],
    ["flux,E_flux", ["value", "sd"]],
    ["flux,err_up,err_lo", ["value", "plus", "minus"]],
    ["flux,flux_err_up,flux_err_lo", ["value", "plus", "minus"]],
    ["flux,flux_errup,flux_errlo", ["value", "plus", "minus"]],
    ["flux,err_plus_flux,err_minus_flux", ["value", "plus", "minus"]],
    ["flux,flux_upper_err,flux_lower_err", ["value", "plus", "minus"]],
    ["flux,flux+,flux-", ["value", "plus", "minus"]],
    ["flux,+err,-err", ["value", "plus", "minus"]],
    ["value,plus,minus", ["value", "plus", "minus"]],
  ])("%s", (header, expected) => {
    const row = header
      .split(",")
      .map(() => "1")
      .join(",");
    expect(fields(header, row)).toEqual(expected);
  });

  test("another column's error is nobody's", () => {
    expect(fields("flux,e_flux,seeing,e_seeing", "1,2,3,4")).toEqual([
      "value",
      "sd",
      "extra",
      "extra",
    ]);
  });
});

describe("a limit's flag is paired with its value", () => {
  test.each(["l_flux", "flux_limit", "flux_flag", "limit_flag", "flag_flux", "limit"])(
    "%s",
    (flag) => {
      expect(one(`flux,${flag},sigmas`, "8.1,<,3")?.draft).toMatchObject({
        value: 8.1,
        limit: "upper",
        sigmas: 3,
      });
    },
  );

  test("but a flag of something else is kept as extra", () => {
    expect(one("flux,e_flux,flux_flag", "8.1,0.6,3")?.draft).toEqual({
      measurand: "flux-may",
      value: 8.1,
      sd: 0.6,
      extra: { flux_flag: 3 },
    });
  });
});

describe("a value's column is told", () => {
  test("by its unit, where only one has an observable's dimension", () => {
    const read = readDrafts("night,S3 [mJy],T [K]\n1,8.1,280\n");
    expect(read.matches.map(({ field, why }) => [field, why])).toEqual([
      ["batch", "synonym"],
      ["value", "unit"],
      ["extra", "none"],
    ]);
    expect(read.matches[1]?.conversion).toBe("mJy to Jy when it is counted: × 0.001");
    expect(read.rows[0]?.problems).toEqual([]);
  });

  test("not where two have it", () => {
    expect(readDrafts("S3 [mJy],S6 [mJy]\n8.1,9\n").problems).toEqual([
      {
        line: null,
        column: null,
        found: "no column that holds a result",
        allowed: "a column that is, or is chosen to be, value, count or occurred",
      },
    ]);
  });

  test("by the name of its unit", () => {
    const read = readDrafts("JD,mag,mag_err\n2463000.5,21.3,0.1\n", { document: manyQuantities });
    expect(read.matches.map(({ field }) => field)).toEqual(["observedAt", "value@glow", "sd@glow"]);
  });

  test("by its UCD, and its error by what it is an error of", () => {
    const columns = [
      { ucd: "time.epoch", name: "t", timeFormat: "mjd" },
      { ucd: "phot.mag;em.opt.B", name: "Bmag" },
      { ucd: "stat.error;phot.mag;em.opt.B", name: "dB" },
      { ucd: "pos.eq.ra;meta.main", name: "ra" },
      { ucd: "meta.id;meta.main", name: "name" },
      { ucd: "instr.tel", name: "tel" },
      { ucd: "meta.bib.bibcode", name: "paper" },
    ].map((one) => ({ ...plainColumn(one.name), ...one }));
    const context = { document: manyQuantities, defaults: { measurand: "glow-may" } };
    const matches = matchColumns({ columns, rows: [] }, context);
    expect(matches.map(({ field, why }) => [field, why])).toEqual([
      ["observedAt", "ucd"],
      ["value", "ucd"],
      ["sd", "ucd"],
      ["extra", "none"],
      ["id", "ucd"],
      ["facility", "ucd"],
      ["source", "ucd"],
    ]);
  });

  test("by the only column that has an error", () => {
    expect(fields("night,width,e_width,seeing", "1,2,3,4")).toEqual([
      "batch",
      "value",
      "sd",
      "extra",
    ]);
  });
});

describe("a table with several quantities side by side", () => {
  const text =
    "id,date-obs,flux [mJy],e_flux,glow,glow_err,l_glow,nsigma,tremors,plume,filter\n" +
    "n1,2031-05-04T11:20:00,8100,600,21.4,0.1,,,6,yes,B\n" +
    "n2,2031-06-04T11:20:00,8.1,0.6,,,,,,,B\n" +
    "n3,2031-05-05T11:20:00,,,22.1,,>,5,,no,B\n";
  const read = readDrafts(text, { document: manyQuantities });

  test("gives a draft for each result in a row, and none for missing ones", () => {
    expect(read.problems).toEqual([]);
    expect(read.rows.map(({ line, draft }) => [line, draft?.measurand, draft?.id])).toEqual([
      [2, "flux-may", "n1:flux"],
      [2, "glow-may", "n1:glow"],
      [2, "tremors-may", "n1:tremors"],
      [2, "plume-may", "n1:plume"],
      [3, "flux-june", "n2:flux"],
      [4, "glow-may", "n3:glow"],
      [4, "plume-may", "n3:plume"],
    ]);
  });

  test("each with its own value, error, limit and unit, and with what all have", () => {
    expect(read.rows[0]?.draft).toEqual({
      id: "n1:flux",
      measurand: "flux-may",
      observedAt: "2031-05-04T11:20:00Z",
      value: 8100,
      sd: 600,
      unit: "mJy",
      extra: { filter: "B" },
    });
    expect(read.rows[5]?.draft).toEqual({
      id: "n3:glow",
      measurand: "glow-may",
      observedAt: "2031-05-05T11:20:00Z",
      value: 22.1,
      limit: "fainter",
      sigmas: 5,
      extra: { filter: "B" },
    });
    expect(read.rows[2]?.draft).toMatchObject({ count: 6 });
    expect(read.rows[6]?.draft).toMatchObject({ occurred: false });
  });

  test("says which measurand was found, and refuses where none or several fit", () => {
    expect(read.rows[0]?.notes).toContain("falls in the measurand flux-may");
    const outside = readDrafts("date,flux,e_flux\n2032-01-01T00:00:00Z,1,0.1\n", {
      document: manyQuantities,
    });
    expect(outside.rows[0]).toMatchObject({
      draft: null,
      problems: [
        {
          column: "measurand",
          found: "no measurand for flux, at 2032-01-01T00:00:00Z",
          allowed: expect.any(String),
        },
      ],
    });
  });

  test("conditions go to the results that have them, and are extra for others", () => {
    const { rows } = readDrafts(
      "date-obs,flux,flux_err,glow,glow_err,depth [cm]\n2031-05-04T11:20:00,1,0.1,21,0.1,1200\n",
      { document: manyQuantities },
    );
    expect(rows.map(({ draft }) => [draft?.conditions, draft?.extra])).toEqual([
      [{ depth: 12 }, undefined],
      [undefined, { "depth [cm]": 1200 }],
    ]);
  });

  test("with measurands' own names needs no time", () => {
    const named = readDrafts("flux-may,flux-may_err,flux-june,flux-june_err\n1,0.1,2,0.2\n", {
      document: manyQuantities,
    });
    expect(named.rows.map(({ draft }) => draft)).toEqual([
      { measurand: "flux-may", value: 1, sd: 0.1 },
      { measurand: "flux-june", value: 2, sd: 0.2 },
    ]);
  });

  test("an error that names none of them is kept as extra, and what lacks it told at its row", () => {
    const read = readDrafts("flux-may,flux-june,err\n1,2,0.2\n", { document: manyQuantities });
    expect(read.matches[2]).toMatchObject({ field: "extra", why: "none" });
  });
});

describe("choices go first", () => {
  test("by column: a field, extra or ignore", () => {
    const read = readDrafts("a,b,c,d\n8.1,0.6,x,y\n", {
      choices: { columns: { a: "value", b: "sd", d: "ignore" } },
    });
    expect(read.matches.map(({ field, why }) => [field, why])).toEqual([
      ["value", "chosen"],
      ["sd", "chosen"],
      ["extra", "none"],
      ["ignore", "chosen"],
    ]);
    expect(read.rows[0]?.draft).toEqual({
      measurand: "flux-may",
      value: 8.1,
      sd: 0.6,
      extra: { c: "x" },
    });
  });

  test("a unit that the file doesn't give", () => {
    expect(
      one("value,sd", "8.1,0.6", { choices: { units: { value: "mJy" } } })?.draft,
    ).toMatchObject({ unit: "mJy" });
  });

  test("a field that there isn't is refused by name", () => {
    const { problems } = readDrafts("value,b\n1,2\n", { choices: { columns: { b: "sdd" } } });
    expect(problems).toMatchObject([{ column: "b", found: "the field sdd" }]);
    const of = readDrafts("value,b\n1,2\n", { choices: { columns: { b: "sd@nothing" } } });
    expect(of.problems).toMatchObject([{ column: "b", found: "the field sd@nothing" }]);
  });
});

describe("what a table may also say of its rows", () => {
  test("a facility by its title, a source by its DOI, a provisional status, a reason to set aside", () => {
    const header = "value,sd,observatory,doi,status,same data,set aside because";
    expect(
      one(header, "8.1,,North Raft,10.1234/x.5,prelim,plate-7,no uncertainty given")?.draft,
    ).toEqual({
      measurand: "flux-may",
      value: 8.1,
      facility: "north-raft",
      source: "doi:10.1234/x.5",
      status: "provisional",
      setAside: { reason: "no uncertainty given" },
      sameData: "plate-7",
    });
  });

  test("what only counts or events have is theirs beside other results", () => {
    const header = "date-obs,flux,err,tremors,exposure,plume,efficiency";
    expect(
      fields(header, "2031-05-04T11:20:00,8.1,0.6,6,1,yes,0.9", { document: manyQuantities }),
    ).toEqual([
      "observedAt",
      "value@flux",
      "sd@flux",
      "count@tremors",
      "exposure@tremors",
      "occurred@plume",
      "efficiency@plume",
    ]);
  });

  test("what only counts have is extra where there are none", () => {
    expect(fields("value,sd,exposure", "8.1,0.6,300")).toEqual(["value", "sd", "extra"]);
    expect(fields("count,exposure,background", "6,1,0.5", { document: manyQuantities })).toEqual([
      "count",
      "exposure",
      "background",
    ]);
  });

  test("an extra keeps its unit in its name", () => {
    expect(one("value,sd,seeing [arcsec]", "8.1,0.6,1.2")?.draft?.extra).toEqual({
      "seeing [arcsec]": 1.2,
    });
  });

  test("a unit of another dimension than the observable's is refused at its column", () => {
    expect(readDrafts("value [m],sd\n1,2\n", { document: oneQuantity }).problems).toEqual([
      {
        line: null,
        column: "value",
        found: "the unit m",
        allowed: "Jy, the unit of flux, or one of its dimension",
      },
    ]);
  });
});
