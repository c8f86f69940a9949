/**
 * What the running role may do, table by table. It owns nothing; the ledger it can only append to.
 */
const append = "select, insert";
const change = "select, insert, update, delete";

export const grants: Record<string, string> = {
  entries: append,
  nodes: append,
  heads: append,
  signing_keys: append,
  campaigns: "select, insert, update",
  tips: "select, insert, update",
  parts: change,
  measurements: change,
  time_stamps: append,
  held_seals: "select, insert, delete",
  remembered_matches: change,
  uploads: "select, insert, delete",
  staged_parts: "select, insert, delete",
  staged_measurements: change,
  staged_entries: change,
  staged_fates: change,
  standings: change,
  timeline_steps: change,
  timeline_points: change,
  scorer_states: change,
  webhooks: change,
  webhook_deliveries: change,
  memberships: change,
  api_keys: "select, insert, update",
  kept_answers: change,
  request_rates: change,
  user: change,
  session: change,
  account: change,
  verification: change,
  rate_limit: change,
};

/** Tables that nobody may change: the running role must not own them either. */
export const ledgerTables = ["entries", "nodes", "heads"] as const;
