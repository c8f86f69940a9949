import type { Scope } from "@weighhouse/desk/scopes";

/** What a scope lets a program do, in words for who makes a key. */
export const scopeWords: Record<Scope, { label: string; help: string }> = {
  read: {
    label: "Read",
    help: "The campaign document, standings, verdicts, ledger and audit trail.",
  },
  "measurements:post": {
    label: "Post measurements",
    help: "Preview and post them; they stand under your name and team.",
  },
  "measurements:correct": {
    label: "Correct measurements",
    help: "Correct, set aside and withdraw those that you may, with a reason.",
  },
  seals: {
    label: "Seal",
    help: "Put seals on record and open them.",
  },
  webhooks: {
    label: "Webhooks",
    help: "Make, test and remove addresses that are told; for coordinators’ keys alone.",
  },
};

/** In the order of the form. */
export const scopesInOrder = Object.keys(scopeWords) as Scope[];
