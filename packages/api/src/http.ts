import { createHash } from "node:crypto";
import type { Context } from "./context";
import { answerOnce } from "./http/answer-once";
import { ApiError } from "./http/api-error";
import { authenticate, requireScope } from "./http/authenticate";
import { campaignRoutes } from "./http/campaign";
import { feedRoutes } from "./http/feed";
import { countRequest } from "./http/count-request";
import { readQuery, routeFinder } from "./http/find-route";
import { ledgerRoutes } from "./http/ledger";
import { measurementRoutes } from "./http/measurements";
import { chooseType } from "./http/media-types";
import { bodyTypeOf, limitBody } from "./http/read-body";
import type { Question, Route } from "./http/route";
import { recordRoutes } from "./http/records";
import { sealRoutes } from "./http/seals";
import { tableContextRoutes } from "./http/table-context";
import { webhookRoutes } from "./http/webhooks";
import { respondJson } from "./http/respond";
import { describeApi } from "./openapi/describe-api";
import { readMeasurementRoutes } from "./http/read-measurements";
import { uploadRoutes } from "./http/uploads";
import { problemResponse } from "./problem-details";

/** All that stands below `/api/v1/campaigns/{key}/`, in the order in which it is described. */
export const routes: Route[] = [
  ...campaignRoutes,
  ...measurementRoutes,
  ...readMeasurementRoutes,
  ...uploadRoutes,
  ...tableContextRoutes,
  ...recordRoutes,
  ...ledgerRoutes,
  ...feedRoutes,
  ...sealRoutes,
  ...webhookRoutes,
];

const find = routeFinder(routes);

/**
 * Answers what is asked below `/api/v1/campaigns/{key}/`: of public campaigns everyone reads, of
 * others those who have a place in them; what is sent is entered for who may enter it. Refusals are
 * problem details (RFC 9457).
 */
export async function answerHttp(ctx: Context, request: Request): Promise<Response> {
  // How the client stands with its limits is told with refusals too.
  const counted: Record<string, string> = {};
  try {
    const answer = await answerRoute(ctx, request, counted);
    return told(request.method === "HEAD" ? withoutBody(answer) : answer, counted);
  } catch (error) {
    return told(problemResponse(error, ctx.log), counted);
  }
}

async function answerRoute(
  ctx: Context,
  request: Request,
  counted: Record<string, string>,
): Promise<Response> {
  const url = new URL(request.url);
  if (url.pathname === "/api/v1/openapi.json") return answerDescription(ctx, request, counted);
  const { route, key, parameters } = find(request.method, url.pathname);
  const actor = await authenticate(ctx, request, key);
  Object.assign(
    counted,
    await countRequest(ctx.desk.store, route.rate, { headers: request.headers, actor }),
  );
  requireScope(actor, route);
  const bodyType = bodyTypeOf(request, route);
  const answerType = chooseType(request.headers.get("accept"), Object.keys(route.gives.types));
  const asked = {
    ...(route.method === "GET" ? ctx : onPrimary(ctx)),
    actor,
    key,
    parameters,
    query: readQuery(route, url.searchParams),
    bodyType,
    answerType,
  };
  const answer = (request: Request) =>
    route.answer({ ...asked, request } as Question<never, never>);
  const limited = limitBody(request, route.takes[bodyType]?.maxBytes ?? null);
  if (!route.once) return answer(limited);
  return answerOnce(asked, { request: limited, campaign: key, actor }, answer);
}

/** Made once an address: a process has one, or a few under tests. */
const descriptions: Record<string, ReturnType<typeof describeApi>> = {};

/** The description of all this (OpenAPI 3.1). */
async function answerDescription(
  { desk, actor, origin }: Context,
  request: Request,
  counted: Record<string, string>,
): Promise<Response> {
  if (request.method !== "GET" && request.method !== "HEAD") {
    const headers = { allow: "GET, HEAD" };
    throw new ApiError("method-not-allowed", `found ${request.method}; allowed GET, HEAD`, headers);
  }
  const { headers } = request;
  Object.assign(counted, await countRequest(desk.store, "read", { headers, actor }));
  chooseType(headers.get("accept"), ["application/json"]);
  const description = (descriptions[origin] ??= describeApi(routes, origin));
  const digest = createHash("sha256").update(JSON.stringify(description)).digest("base64url");
  return respondJson(request, description, `openapi-${digest}`);
}

/** A replica lags, and who decides on it decides on yesterday. */
function onPrimary(ctx: Context): Context {
  const { store } = ctx.desk;
  return { ...ctx, desk: { ...ctx.desk, store: { ...store, readDb: store.db } } };
}

function withoutBody(answer: Response): Response {
  void answer.body?.cancel();
  return new Response(null, { status: answer.status, headers: answer.headers });
}

function told(answer: Response, counted: Record<string, string>): Response {
  for (const [name, value] of Object.entries(counted)) answer.headers.set(name, value);
  return answer;
}
