import { createContext } from "@weighhouse/api/context";
import { isFromElsewhere } from "@weighhouse/api/http/authenticate";
import { appRouter } from "@weighhouse/api/router";
import { fetchRequestHandler } from "@trpc/server/adapters/fetch";
import { services } from "@/server/services";

export const dynamic = "force-dynamic";

async function answer(request: Request): Promise<Response> {
  const { desk, auth, log } = await services();
  // A page of another port or name of this site would send the session's cookie along.
  if (request.method === "POST" && isFromElsewhere(auth.options.baseURL, request)) {
    return new Response("Only this server's own pages may send this.\n", { status: 403 });
  }
  return fetchRequestHandler({
    endpoint: "/api/trpc",
    req: request,
    router: appRouter,
    createContext: () => createContext({ desk, auth, log, headers: request.headers }),
    onError: ({ error, path }) => {
      if (error.code === "INTERNAL_SERVER_ERROR") {
        log.error({ path, error: String(error.cause ?? error) }, "an API call failed");
      }
    },
  });
}

export { answer as GET, answer as POST };
