import type { Action } from "./roles";

/**
 * What an API key may be made for. A key acts as the member who made it, in that campaign alone: it
 * may do what stands here for one of its scopes, and of that only what the member's role allows.
 */
export const scopes = [
  "read",
  "measurements:post",
  "measurements:correct",
  "seals",
  "webhooks",
] as const;
export type Scope = (typeof scopes)[number];

/** Which actions of the table of roles each scope opens. What stands in none, no key may do. */
export const scopeActions: Record<Scope, readonly Action[]> = {
  read: ["read-campaign", "export-audit-trail"],
  "measurements:post": ["preview-measurements", "post-measurements"],
  "measurements:correct": [
    "preview-measurements",
    "set-aside-measurement",
    "correct-measurement",
    "withdraw-measurements",
  ],
  seals: ["seal-prediction", "seal-measurement", "open-seal"],
  webhooks: ["manage-webhooks"],
};

/** The scopes that open an action; none for what only a person may do. */
export function scopesFor(action: Action): Scope[] {
  return scopes.filter((scope) => scopeActions[scope].includes(action));
}
