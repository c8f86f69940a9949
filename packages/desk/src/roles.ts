/**
 * Who may do what, in one table.
 *
 * A role is held within a campaign. `visitor` (no account) and `account` (signed in) are those who
 * hold none there: all that they may do is see the list, and, with an account, open a campaign of
 * their own. Everyone is a `reader` of a public campaign, with or without an account.
 */
export const roles = ["visitor", "account", "reader", "member", "coordinator"] as const;
export type Role = (typeof roles)[number];

/**
 * `own-team`: only on what belongs to the actor's own team. A coordinator who is in no team acts
 * for no team: the hypotheses that nobody's team stands behind are theirs to register. A member of
 * no team is an observer: nothing of any team is theirs.
 */
export type Permission = "no" | "own-team" | "yes";

type Row = Readonly<Record<Role, Permission>>;

const row = (
  visitor: Permission,
  account: Permission,
  reader: Permission,
  member: Permission,
  coordinator: Permission,
): Row => ({ visitor, account, reader, member, coordinator });

// prettier-ignore
const permissions = {
  //                              visitor  account  reader  member      coordinator
  "list-campaigns":         row("yes",   "yes",   "yes",  "yes",      "yes"),
  "open-campaign":          row("no",    "yes",   "no",   "no",       "no"),
  "import-campaign":        row("no",    "yes",   "no",   "no",       "no"),

  "read-campaign":          row("no",    "no",    "yes",  "yes",      "yes"),
  "export-audit-trail":     row("no",    "no",    "yes",  "yes",      "yes"),
  "list-members":           row("no",    "no",    "no",   "yes",      "yes"),

  "register-hypothesis":    row("no",    "no",    "no",   "own-team", "own-team"),
  "amend-hypothesis":       row("no",    "no",    "no",   "own-team", "own-team"),
  "retire-hypothesis":      row("no",    "no",    "no",   "own-team", "own-team"),
  "propose-measurand":      row("no",    "no",    "no",   "own-team", "own-team"),
  "object-to-reference":    row("no",    "no",    "no",   "own-team", "own-team"),
  "seal-prediction":        row("no",    "no",    "no",   "own-team", "own-team"),
  "seal-measurement":       row("no",    "no",    "no",   "yes",      "yes"),
  "open-seal":              row("no",    "no",    "no",   "yes",      "yes"),
  "make-remark":            row("no",    "no",    "no",   "yes",      "yes"),
  "cite-standings":         row("no",    "no",    "no",   "yes",      "yes"),
  "preview-measurements":   row("no",    "no",    "no",   "yes",      "yes"),
  "post-measurements":      row("no",    "no",    "no",   "yes",      "yes"),
  "set-aside-measurement":  row("no",    "no",    "no",   "own-team", "yes"),
  "correct-measurement":    row("no",    "no",    "no",   "own-team", "yes"),
  "withdraw-measurements":  row("no",    "no",    "no",   "own-team", "yes"),

  "make-api-key":           row("no",    "no",    "no",   "yes",      "yes"),
  "list-api-keys":          row("no",    "no",    "no",   "yes",      "yes"),
  "revoke-api-key":         row("no",    "no",    "no",   "yes",      "yes"),

  "amend-campaign":         row("no",    "no",    "no",   "no",       "yes"),
  "declare":                row("no",    "no",    "no",   "no",       "yes"),
  "add-team":               row("no",    "no",    "no",   "no",       "yes"),
  "add-member":             row("no",    "no",    "no",   "no",       "yes"),
  "manage-webhooks":        row("no",    "no",    "no",   "no",       "yes"),
  "close-registration":     row("no",    "no",    "no",   "no",       "yes"),
} as const satisfies Record<string, Row>;

export type Action = keyof typeof permissions;
export const actions = Object.keys(permissions) as Action[];

/** What the table says of a role and an action. */
export function permission(role: Role, action: Action): Permission {
  return permissions[action][role];
}

/** Whether an actor of this role and team may do it to something that belongs to `of`. */
export function may(role: Role, action: Action, teams: { own: string | null; of: string | null }) {
  const allowed: Permission = permission(role, action);
  const isObserver = role === "member" && teams.own === null;
  return allowed === "yes" || (allowed === "own-team" && teams.own === teams.of && !isObserver);
}
