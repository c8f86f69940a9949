import type { Actor } from "@weighhouse/desk/desk";
import { actorOfApiKey } from "@weighhouse/desk/api-key-actor";
import { trustedOrigins } from "../auth";
import type { Context } from "../context";
import { ApiError } from "./api-error";
import { countRequest } from "./count-request";
import type { Route } from "./route";

/**
 * Who asks: whom the key in `Authorization: Bearer` acts for, else who is signed in by the session's
 * cookie. A browser sends that cookie along with what another site's page asks for, so what changes
 * anything must come from a page of this origin; a key no browser sends by itself.
 *
 * @throws {ApiError} `bad-key`, `other-origin`
 */
export async function authenticate(
  ctx: Context,
  request: Request,
  campaign: string,
): Promise<Actor> {
  const authorization = request.headers.get("authorization") ?? "";
  const [, text = ""] = /^bearer\b *(.*)$/i.exec(authorization) ?? [];
  // Another scheme is for a proxy before this server, not for it.
  if (!/^bearer\b/i.test(authorization)) {
    if (ctx.actor !== null && !isSafe(request.method)) requireSameOrigin(ctx, request);
    return ctx.actor;
  }
  const answer = await actorOfApiKey(ctx.desk, { campaign, text: text.trim() });
  if ("actor" in answer) return answer.actor;
  const { headers } = request;
  const counted = await countRequest(ctx.desk.store, "bad-key", { headers, actor: null });
  const challenge = `Bearer error="invalid_token", error_description="${answer.refused}"`;
  throw new ApiError("bad-key", `${answer.refused}; allowed is one that a member made here`, {
    ...counted,
    "www-authenticate": challenge,
  });
}

/** Refuses a key without the scope before anything of the body is read (RFC 6750, 3.1). */
export function requireScope(actor: Actor, { scope }: Route): void {
  const key = actor?.through;
  if (key === undefined || key.scopes.includes(scope)) return;
  throw new ApiError(
    "insufficient-scope",
    `found a key with the scopes ${key.scopes.join(", ")}; allowed with the scope ${scope}`,
    { "www-authenticate": `Bearer error="insufficient_scope", scope="${scope}"` },
  );
}

function isSafe(method: string): boolean {
  return method === "GET" || method === "HEAD";
}

function requireSameOrigin(ctx: Context, request: Request): void {
  const { origin, site } = whereFrom(request);
  const named = origin !== null || site !== null;
  if (named && !isFromElsewhere(ctx.origin, request)) return;
  const found = `Origin ${origin ?? "(none)"} and Sec-Fetch-Site ${site ?? "(none)"}`;
  throw new ApiError(
    "other-origin",
    `found ${found} beside a session's cookie; allowed are this server's own pages, and programs with a key in Authorization: Bearer`,
  );
}

/**
 * Whether a browser says that a page of another origin asks. It names the page's origin in what it
 * posts, and its relation to this server; both fields are out of a page's reach.
 */
export function isFromElsewhere(ownOrigin: string, request: Request): boolean {
  const { origin, site } = whereFrom(request);
  const named = origin === null || trustedOrigins(ownOrigin, request).includes(origin);
  return !named || !(site === null || site === "same-origin");
}

function whereFrom({ headers }: Request) {
  return { origin: headers.get("origin"), site: headers.get("sec-fetch-site") };
}
