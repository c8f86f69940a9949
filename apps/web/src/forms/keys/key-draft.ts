import { line, time } from "@weighhouse/campaign/fields";
import type { Scope } from "@weighhouse/desk/scopes";
import { z } from "zod";
import { scopesInOrder } from "./scope-words";

export interface KeyDraft {
  title: string;
  scopes: Record<Scope, boolean>;
  /** Days that it holds, as a text; empty: until it is revoked. */
  days: string;
}

export const emptyKey: KeyDraft = {
  title: "",
  scopes: {
    read: true,
    "measurements:post": true,
    "measurements:correct": false,
    seals: false,
    webhooks: false,
  },
  days: "365",
};

// The server's own has the campaign's key besides.
export const keySchema = z.strictObject({
  title: line,
  scopes: z.array(z.enum(scopesInOrder)).min(1),
  expiresAt: time.nullable(),
});

export type KeyContent = z.output<typeof keySchema>;

/** What the form stands for at a time. */
export function keyContent({ title, scopes, days }: KeyDraft, now: Date): unknown {
  return {
    title: title.trim(),
    scopes: scopesInOrder.filter((scope) => scopes[scope]),
    expiresAt: days === "" ? null : daysAfter(now, Number(days)),
  };
}

function daysAfter(now: Date, days: number): string {
  return new Date(now.getTime() + days * 86_400_000).toISOString();
}
