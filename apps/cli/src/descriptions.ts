/** What each command does, in one place: the usage shows all without loading any. */
export const descriptions = {
  score: "Score a campaign document",
  check: "List every error and warning of a campaign document",
  verify: "Recompute everything in an audit trail, a line per check",
  export: "Save a campaign's audit trail from a server",
} as const;
