import type { Actor, Desk } from "@weighhouse/desk/desk";
import type { Log } from "@weighhouse/store/open-store";
import type { Auth } from "./auth";

/** What a procedure works with. */
export type Context = {
  desk: Desk;
  actor: Actor;
  log: Log;
  /** Where people reach this server, such as `http://localhost:3000`. */
  origin: string;
};

/** The context of one request: who asks is told by its session's cookie. */
export async function createContext(request: {
  desk: Desk;
  auth: Auth;
  log: Log;
  headers: Headers;
}): Promise<Context> {
  const { desk, auth, log, headers } = request;
  const origin = auth.options.baseURL;
  return { desk, log, origin, actor: await readActor(auth, headers) };
}

/** Who asks, by the session's cookie; null without one, or with one that holds no more. */
export async function readActor(auth: Auth, headers: Headers): Promise<Actor> {
  const session = await auth.api.getSession({ headers });
  return session && { userId: session.user.id, name: session.user.name };
}
