import { describe, expect, test } from "vitest";
import { readDrafts } from "./testing/harbour";

const read = (text: string, defaults = {}) => readDrafts(text, { defaults });
const drafts = (text: string, defaults = {}) => read(text, defaults).rows.map((row) => row.draft);

describe("columns", () => {
  test("named for a measurement's fields fill them", () => {
    const table = read(
      "id,measurand,facility,team,batch,observedAt,value,sd,unit,status,source,shared,sameData\n" +
        "m-1,flux-may,raft,north,night-1,2031-05-04T11:20:00Z,8.1,0.6,mJy,provisional,doi:10/x,zero-point:1; scale:0.5,plate-7\n",
    );
    expect(table.problems).toEqual([]);
    expect(table.rows).toEqual([
      {
        line: 2,
        problems: [],
        notes: [],
        draft: {
          id: "m-1",
          measurand: "flux-may",
          facility: "raft",
          team: "north",
          batch: "night-1",
          observedAt: "2031-05-04T11:20:00Z",
          value: 8.1,
          sd: 0.6,
          unit: "mJy",
          status: "provisional",
          source: "doi:10/x",
          shared: [
            { error: "zero-point", coefficient: 1 },
            { error: "scale", coefficient: 0.5 },
          ],
          sameData: "plate-7",
        },
      },
    ]);
  });

  test.each(["err", "Error", "uncertainty", "sigma", "σ", "std_dev", "Standard uncertainty"])(
    "called %s is the standard uncertainty (common practice)",
    (name) => {
      expect(drafts(`measurand,value,${name}\nflux-may,8.1,0.6\n`)).toEqual([
        { measurand: "flux-may", value: 8.1, sd: 0.6 },
      ]);
    },
  );

  test("take the unit from the header, and dex for the uncertainty of a logarithm", () => {
    expect(drafts("measurand,value [mJy],sd [mJy]\nflux-may,8.1,0.6\n")).toEqual([
      { measurand: "flux-may", value: 8.1, sd: 0.6, unit: "mJy" },
    ]);
    expect(drafts("measurand,value (Jy),sd [dex]\nflux-may,8.1,0.1\n")).toEqual([
      { measurand: "flux-may", value: 8.1, sdDex: 0.1, unit: "Jy" },
    ]);
  });

  test("named for a condition fill it, converted to the condition's unit", () => {
    expect(drafts("measurand,value,sd,Depth [m]\nflux-may,8.1,0.6,12\n")).toEqual([
      { measurand: "flux-may", value: 8.1, sd: 0.6, conditions: { depth: 12 } },
    ]);
    expect(drafts("measurand,value,sd,depth [cm]\nflux-may,8.1,0.6,1200\n")).toEqual([
      { measurand: "flux-may", value: 8.1, sd: 0.6, conditions: { depth: 12 } },
    ]);
    expect(read("measurand,value,sd,depth [s]\nflux-may,8.1,0.6,12\n").problems).toEqual([
      { line: null, column: "depth", found: "depth in s", allowed: "m" },
    ]);
  });

  test("that fill no field are kept under their names, and named", () => {
    const table = read("measurand,value,sd,filter,seeing\nflux-may,8.1,0.6,B,1.2\n");
    const extra = table.matches.filter(({ field }) => field === "extra");
    expect(extra.map(({ column, why }) => [column, why])).toEqual([
      ["filter", "none"],
      ["seeing", "none"],
    ]);
    expect(table.rows[0]?.draft?.extra).toEqual({ filter: "B", seeing: 1.2 });
    expect(drafts("measurand,value,sd,plate\nflux-may,8.1,0.6,007\n")[0]?.extra).toEqual({
      plate: "007",
    });
  });

  test("that fill one field twice, or whose units don't go together, are refused", () => {
    expect(read("value,err,sigma\n1,2,3\n")).toMatchObject({
      rows: [],
      problems: [
        {
          line: null,
          column: "sigma",
          found: "a column that fills sd, as the column err does",
          allowed: "each field in one column; choose another field, extra or ignore",
        },
      ],
    });
    expect(read("value [Jy],sd [m]\n1,2\n").problems).toEqual([
      {
        line: null,
        column: "sd",
        found: "the unit m beside Jy",
        allowed: "the value's unit, or one of its dimension",
      },
    ]);
    expect(read("value,note,note\n1,a,b\n").problems).toEqual([
      expect.objectContaining({ column: "note", found: "a column that is there twice" }),
    ]);
  });

  test("of uncertainties in another unit are brought into the value's", () => {
    expect(drafts("measurand,value [Jy],sd [mJy]\nflux-may,8.1,600\n")).toEqual([
      { measurand: "flux-may", value: 8.1, sd: 0.6, unit: "Jy" },
    ]);
  });

  test("measurand and facility come from the defaults where the row has none", () => {
    const defaults = { measurand: "flux-may", facility: "raft" };
    expect(drafts("facility,value,sd\n,8.1,0.6\npier,8.2,0.6\n", defaults)).toEqual([
      { measurand: "flux-may", facility: "raft", value: 8.1, sd: 0.6 },
      { measurand: "flux-may", facility: "pier", value: 8.2, sd: 0.6 },
    ]);
  });
});

describe("times", () => {
  const observed = (header: string, cells: string) =>
    read(`measurand,value,sd,${header}\nflux-may,8.1,0.6,${cells}\n`).rows[0];

  test.each([
    ["observedAt", "2031-05-04T11:20:00Z", "2031-05-04T11:20:00Z"],
    ["date", "2031-05-04 11:20 UTC", "2031-05-04T11:20:00Z"],
    ["date", "2031-05-04T20:20:00.5+09:00", "2031-05-04T11:20:00.5Z"],
    ["date [UTC]", "2031-05-04 11:20:30", "2031-05-04T11:20:30Z"],
    ["DATE-OBS", "2031-05-04T11:20:30.125", "2031-05-04T11:20:30.125Z"],
    ["date,time [UTC]", "2031-05-04,11:20", "2031-05-04T11:20:00Z"],
    ["date,time", "2031-05-04,11:20Z", "2031-05-04T11:20:00Z"],
  ])("%s %s", (header, cells, time) => {
    expect(observed(header, cells)?.problems).toEqual([]);
    expect(observed(header, cells)?.draft?.observedAt).toBe(time);
  });

  test.each(["4 May 2031", "2031-02-30T00:00:00Z", "2031-05-04"])(
    "%s is refused: no such day, or no time",
    (time) => {
      expect(observed("date", time)?.problems).toEqual([
        {
          column: "date",
          found: JSON.stringify(time),
          allowed: expect.stringContaining("2031-03-01T00:00:00Z"),
        },
      ]);
    },
  );
});

test("times without a zone are refused once for all", () => {
  expect(read("value,sd,date\n8.1,0.6,2031-05-04 11:20\n8.2,0.6,2031-05-04 11:30\n")).toMatchObject(
    {
      rows: [],
      problems: [{ column: "date", found: '"2031-05-04 11:20", without a zone' }],
    },
  );
});

describe("a bad row", () => {
  test("names its line, its column and what is allowed; the good ones stand", () => {
    const table = read(
      "measurand,value,err,status\nflux-may,8.1,0.6,final\nflux-may,about 8,-1,done\nflux-may,8.2,0.5,\n",
    );
    expect(table.rows.map(({ line, draft }) => [line, draft !== null])).toEqual([
      [2, true],
      [3, false],
      [4, true],
    ]);
    expect(table.rows[1]?.problems).toEqual([
      { column: "value", found: '"about 8"', allowed: "a number" },
      { column: "err", found: "-1", allowed: "a number above 0" },
      { column: "status", found: '"done"', allowed: '"final" or "provisional"' },
    ]);
  });

  test("with a cell too few or too many is not read at all", () => {
    expect(read("measurand,value,sd\nflux-may,8.1\nflux-may,8,1,0,6\n").rows).toEqual([
      {
        line: 2,
        draft: null,
        notes: [],
        problems: [{ column: null, found: "2 cells", allowed: "3, as in the header" }],
      },
      {
        line: 3,
        draft: null,
        notes: [],
        problems: [{ column: null, found: "5 cells", allowed: "3, as in the header" }],
      },
    ]);
  });

  test.each(["1e999", "0x10", "1 000", "Infinity", "1.2.3"])(
    "with %s for a number is refused, since two readers may read it two ways or none",
    (text) => {
      const table = read(`measurand;value;sd\nflux-may;${text};0.6\n`);
      expect(table.rows[0]?.problems).toEqual([
        { column: "value", found: JSON.stringify(text), allowed: "a number" },
      ]);
    },
  );

  test("in another unit than the header's is refused", () => {
    expect(read("measurand,value [Jy],sd,unit\nflux-may,8.1,0.6,mJy\n").rows[0]?.problems).toEqual([
      {
        column: "unit",
        found: "the unit mJy under a header in Jy",
        allowed: "the header's unit, or none in the header",
      },
    ]);
  });
});

test("typographic minus signs and leading plus signs are numbers", () => {
  expect(drafts("measurand,value,sd\nflux-may,−1.5,+0.6\n")).toEqual([
    { measurand: "flux-may", value: -1.5, sd: 0.6 },
  ]);
});

test("twenty thousand rows are read in seconds", () => {
  const text = `measurand,value,sd\n${"flux-may,8.1,0.6\n".repeat(20_000)}`;
  expect(read(text).rows).toHaveLength(20_000);
});
