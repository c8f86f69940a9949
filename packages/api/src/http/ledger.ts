import * as z from "zod";
import { readConsistency } from "@weighhouse/desk/read-consistency";
import { readEntry } from "@weighhouse/desk/read-entry";
import { readLedgerLines } from "@weighhouse/desk/read-ledger-lines";
import { readTimeStamps } from "@weighhouse/desk/read-time-stamps";
import { readTreeHead } from "@weighhouse/desk/read-tree-head";
import {
  consistencySchema,
  ledgerLineSchema,
  provedEntrySchema,
  timeStampsSchema,
} from "./ledger-answers";
import { respond, respondJson } from "./respond";
import { route } from "./route";

const group = "Ledger";
const scope = "read";

export const ledgerRoutes = [
  route({
    method: "GET",
    path: "ledger/head",
    group,
    summary: "The newest signed tree head",
    says: "A signed note (C2SP): origin, size, root and signature, a line each.",
    scope,
    gives: { status: 200, types: { "text/plain": { schema: null, says: "The note." } } },
    async answer({ desk, actor, request, key }) {
      const { note, size } = await readTreeHead(desk, actor, { key });
      return respond(request, note, { type: "text/plain; charset=utf-8", tag: `head-${size}` });
    },
  }),
  route({
    method: "GET",
    path: "ledger/entries",
    group,
    summary: "Entries by page",
    says: "Entries [from, to) in order, at most 1,000 at a time; where there are more, a Link header names the next page.",
    scope,
    query: z.strictObject({
      from: z.int().min(0).optional().describe("The first entry; 0 without."),
      to: z.int().min(0).optional().describe("The entry before which it ends."),
    }),
    gives: {
      status: 200,
      types: {
        "application/x-ndjson": { schema: ledgerLineSchema, says: "A line for each entry." },
      },
    },
    async answer({ desk, actor, request, key, query }) {
      const { to } = query;
      const lines = await readLedgerLines(desk, actor, { key, ...query });
      const more = lines.to < Math.min(to ?? lines.size, lines.size);
      const rest = `from=${lines.to}${to === undefined ? "" : `&to=${to}`}`;
      const next = `/api/v1/campaigns/${key}/ledger/entries?${rest}`;
      return respond(request, lines.text, {
        type: "application/x-ndjson",
        // What follows a page is part of its answer: the last one gets a next one as entries come.
        tag: `entries-${lines.from}-${lines.to}${more ? "-more" : ""}`,
        headers: more ? { link: `<${next}>; rel="next"` } : {},
      });
    },
  }),
  route({
    method: "GET",
    path: "ledger/entries/{seq}",
    group,
    summary: "One entry with its proof",
    scope,
    parameters: z.strictObject({ seq: z.int().min(0).describe("The entry's number, from 0.") }),
    gives: {
      status: 200,
      types: {
        "application/json": { schema: provedEntrySchema, says: "The entry and its proof." },
      },
    },
    async answer({ desk, actor, request, key, parameters: { seq } }) {
      // A name is no part of the ledger: it is shown on pages, and forgotten with the person.
      const { name: _, ...entry } = await readEntry(desk, actor, { key, seq });
      return respondJson(request, entry, `entry-${seq}-${entry.head.size}`);
    },
  }),
  route({
    method: "GET",
    path: "ledger/consistency",
    group,
    summary: "A proof that one head goes on from another",
    scope,
    query: z.strictObject({
      from: z.int().min(1).default(1).describe("The size of a head that was kept."),
      to: z.int().min(1).optional().describe("The size of a later one; the newest without."),
    }),
    gives: {
      status: 200,
      types: { "application/json": { schema: consistencySchema, says: "The proof (RFC 6962)." } },
    },
    async answer({ desk, actor, request, key, query }) {
      const proved = await readConsistency(desk, actor, { key, ...query });
      return respondJson(request, proved, `consistency-${proved.from}-${proved.to}`);
    },
  }),
  route({
    method: "GET",
    path: "ledger/time-stamps",
    group,
    summary: "Which heads are time-stamped",
    says: "RFC 3161 tokens over heads, and the heads that should have one and don't yet.",
    scope,
    gives: {
      status: 200,
      types: { "application/json": { schema: timeStampsSchema, says: "The time-stamps." } },
    },
    async answer({ desk, actor, request, key }) {
      const stamps = await readTimeStamps(desk, actor, { key });
      const { stamped, missing } = stamps;
      const tag = [stamped.length, ...missing.map(({ size }) => size)].join("-");
      return respondJson(request, stamps, `time-stamps-${tag}`);
    },
  }),
];
