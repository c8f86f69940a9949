import { createContext } from "@weighhouse/api/context";
import { answerHttp } from "@weighhouse/api/http";
import { services } from "@/server/services";

export const dynamic = "force-dynamic";

async function answer(request: Request): Promise<Response> {
  const { desk, auth, log } = await services();
  return answerHttp(await createContext({ desk, auth, log, headers: request.headers }), request);
}

export {
  answer as GET,
  answer as HEAD,
  answer as POST,
  answer as PUT,
  answer as PATCH,
  answer as DELETE,
};
