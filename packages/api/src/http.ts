import type { Context } from "./context";
import { campaignRoutes } from "./http/campaign";
import { feedRoutes } from "./http/feed";
import { readQuery, routeFinder } from "./http/find-route";
import { ledgerRoutes } from "./http/ledger";
import { chooseType } from "./http/media-types";
import { bodyTypeOf, limitBody } from "./http/read-body";
import type { Question, Route } from "./http/route";
import { sealRoutes } from "./http/seals";
import { problemResponse } from "./problem-details";

/** All that stands below `/api/v1/campaigns/{key}/`, in the order in which it is described. */
export const routes: Route[] = [...campaignRoutes, ...ledgerRoutes, ...feedRoutes, ...sealRoutes];

const find = routeFinder(routes);

/**
 * Answers what is asked below `/api/v1/campaigns/{key}/`: of public campaigns everyone reads, of
 * others those who have a place in them; what is sent is entered for who may enter it. Refusals are
 * problem details (RFC 9457).
 */
export async function answerHttp(ctx: Context, request: Request): Promise<Response> {
  try {
    const answer = await answerRoute(ctx, request);
    return request.method === "HEAD" ? withoutBody(answer) : answer;
  } catch (error) {
    return problemResponse(error, ctx.log);
  }
}

async function answerRoute(ctx: Context, request: Request): Promise<Response> {
  const url = new URL(request.url);
  const { route, key, parameters } = find(request.method, url.pathname);
  const bodyType = bodyTypeOf(request, route);
  const answerType = chooseType(request.headers.get("accept"), Object.keys(route.gives.types));
  const question: Question = {
    ...(route.method === "GET" ? ctx : onPrimary(ctx)),
    request: limitBody(request, route.takes[bodyType]?.maxBytes ?? null),
    key,
    parameters,
    query: readQuery(route, url.searchParams),
    bodyType,
    answerType,
  };
  return route.answer(question as Question<never, never>);
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
