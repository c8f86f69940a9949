/** What each command does, in one place: the usage shows all without loading any. */
export const descriptions = {
  score: "Score a campaign document",
  check: "List every error and warning of a campaign document",
  sensitivity: "Show what each standing hangs on",
  plan: "Rank candidate measurements by what they would tell",
  simulate: "Draw campaigns from each hypothesis: would they decide?",
  chance: "Correct a coincidence's p for the looks, and bound its Bayes factor",
  verify: "Recompute everything in an audit trail, a line per check",
  seal: "Seal a prediction or a measurement: the digest to file, and the file to keep",
  reveal: "Open a seal on a server with the file that was kept",
  watch: "Watch a campaign's ledger on a server: was anything before rewritten?",
  post: "Post a file of measurements to a server, or tell what would happen",
  export: "Save a campaign's audit trail from a server",
} as const;
