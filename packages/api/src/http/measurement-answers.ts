import * as z from "zod";

/** What the routes of measurements give, as it is described; a test reads their answers by these. */
const count = z.int().min(0);

export const postedSchema = z.strictObject({
  key: z.string().describe("The campaign's."),
  posted: count.describe("How many were entered."),
  alreadyThere: count.describe("How many were there already with the same content."),
  entries: z
    .strictObject({ from: count, to: count })
    .nullable()
    .describe("The ledger's entries [from, to) that were made; null where nothing was new."),
  treeHead: z.string().nullable().describe("The root of the ledger with them, base64."),
  ids: z
    .array(z.string())
    .nullable()
    .describe("Ids of those entered, also where they were given one; null past 1,000."),
});

const progress = z.strictObject({
  stage: z.enum(["read", "check", "enter"]),
  rows: count,
  bytes: count,
});

const problem = z
  .looseObject({ status: z.int(), title: z.string() })
  .describe("What it was refused for (RFC 9457).");

export const postedLineSchema = z.union([
  z.strictObject({ progress }),
  z.strictObject({ done: postedSchema }),
  z.strictObject({ problem }),
]);

const rowProblem = z.strictObject({
  column: z.string().nullable().describe("Null: the row as a whole."),
  found: z.string(),
  allowed: z.string(),
});

export const rowSchema = z.strictObject({
  part: z.int().optional().describe("Of an upload."),
  line: z.int().min(1),
  id: z.string().nullable(),
  fate: z.enum(["new", "alreadyThere", "conflict", "refused"]),
  measurand: z.string().nullable().describe("The one that it falls in."),
  problems: z.array(rowProblem),
  conflict: z
    .strictObject({ id: z.string(), field: z.string(), there: z.unknown(), posted: z.unknown() })
    .nullable()
    .describe("The first field that differs from what is there under that id."),
  notes: z.array(z.string()).describe("What was converted or filled in."),
});

export const previewSchema = z.strictObject({
  size: count.describe("The ledger's size that this was found at."),
  columns: z
    .array(z.looseObject({ column: z.string(), field: z.string().nullable() }))
    .describe("A table's columns, and what each is read as."),
  counts: z.strictObject({ new: count, alreadyThere: count, conflict: count, refused: count }),
  problems: z
    .array(rowProblem.extend({ line: z.int().nullable() }))
    .describe("What is wrong with the whole, or with its rows taken together."),
  postable: z.boolean().describe("Whether posting the same would be taken."),
  changes: z
    .looseObject({
      verdicts: z.array(z.looseObject({ hypothesis: z.string(), measurand: z.string() })),
      ranks: z.array(z.looseObject({ hypothesis: z.string() })),
    })
    .nullable()
    .describe("Standings before and after, the verdicts that would turn, the ranks that move."),
});

export const previewLineSchema = z.union([
  z.strictObject({ row: rowSchema }),
  z.strictObject({ progress }),
  z.strictObject({ preview: previewSchema }),
  z.strictObject({ problem }),
]);

export const historySchema = z.strictObject({
  id: z.string(),
  versions: z
    .array(
      z.strictObject({
        seq: count.describe("The entry that made it."),
        at: z.string(),
        kind: z.string(),
        team: z.string().nullable(),
        reason: z.string().nullable().describe("Of a correction, a withdrawal, a setting aside."),
        withdrawn: z.boolean(),
        measurement: z.looseObject({ id: z.string(), measurand: z.string() }),
      }),
    )
    .describe("Oldest first."),
});
