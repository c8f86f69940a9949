import { randomUUID } from "node:crypto";
import { findCampaign } from "./campaigns";
import type { Store } from "./open-store";

/** A request by its Idempotency-Key, told apart by campaign and member. */
export type AskedOnce = { campaign: string; member: string; key: string };

export type KeptAnswer = {
  /** SHA-256 of what was asked. */
  digest: Uint8Array;
  status: number;
  headers: Record<string, string>;
  body: Uint8Array;
};

export type Claim =
  | { claim: string }
  /** Somebody works on the same request just now. */
  | { claim: null; kept: null }
  | { claim: null; kept: KeptAnswer };

const HELD_SECONDS = 60;
/** How often a claim must be renewed at least. */
export const RENEW_EVERY_MS = (HELD_SECONDS * 1000) / 3;

/**
 * Claims a request for the caller, or gives what was answered to it. A claim whose process died,
 * which renews it no more, may be taken over: what it did and didn't is for the ledger's own rules,
 * which enter nothing twice.
 */
export async function claimAnswer(store: Store, asked: AskedOnce): Promise<Claim> {
  const { member, key } = asked;
  const { id } = await findCampaign(store, asked.campaign, store.db);
  await store.sql`
    delete from kept_answers
    where campaign_id = ${id} and begun_at < clock_timestamp() - interval '1 day'`;
  const claim = randomUUID();
  const [claimed] = await store.sql`
    insert into kept_answers as a (campaign_id, member, key, claim, held_until)
    values (${id}, ${member}, ${key}, ${claim},
      clock_timestamp() + make_interval(secs => ${HELD_SECONDS}))
    on conflict (campaign_id, member, key) do update
      set claim = excluded.claim, held_until = excluded.held_until, begun_at = clock_timestamp()
      where a.status is null and a.held_until < clock_timestamp()
    returning 1`;
  if (claimed !== undefined) return { claim };
  const [kept] = await store.sql<
    { digest: Buffer | null; status: number; headers: string; body: Buffer }[]
  >`
    select digest, status, headers, body from kept_answers
    where campaign_id = ${id} and member = ${member} and key = ${key}`;
  if (!kept?.digest) return { claim: null, kept: null };
  const headers = JSON.parse(kept.headers) as Record<string, string>;
  return { claim: null, kept: { ...kept, digest: kept.digest, headers } };
}

/** Says that the claim's process is alive. */
export async function renewClaim(store: Store, claim: string, asked: AskedOnce): Promise<void> {
  await store.sql`
    update kept_answers a
    set held_until = clock_timestamp() + make_interval(secs => ${HELD_SECONDS})
    from campaigns c
    where c.key = ${asked.campaign} and a.campaign_id = c.id and a.member = ${asked.member}
      and a.key = ${asked.key} and a.claim = ${claim} and a.status is null`;
}

/** Keeps what was answered, for a day from when the request was begun. */
export async function keepAnswer(
  store: Store,
  claim: string,
  asked: AskedOnce,
  answer: KeptAnswer,
): Promise<void> {
  const { digest, status, headers, body } = answer;
  await store.sql`
    update kept_answers a
    set digest = ${Buffer.from(digest)}, status = ${status},
      headers = ${JSON.stringify(headers)}::text::json, body = ${Buffer.from(body)}
    from campaigns c
    where c.key = ${asked.campaign} and a.campaign_id = c.id and a.member = ${asked.member}
      and a.key = ${asked.key} and a.claim = ${claim} and a.status is null`;
}

/** Gives a claim up where nothing was entered: the key is free for another try. */
export async function dropClaim(store: Store, claim: string, asked: AskedOnce): Promise<void> {
  await store.sql`
    delete from kept_answers a using campaigns c
    where c.key = ${asked.campaign} and a.campaign_id = c.id and a.member = ${asked.member}
      and a.key = ${asked.key} and a.claim = ${claim} and a.status is null`;
}
