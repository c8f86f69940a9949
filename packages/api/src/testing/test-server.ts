import { openTestDesk } from "@weighhouse/desk/testing/test-desk";
import type { TestDesk } from "@weighhouse/desk/testing/test-desk";
import { silentLog } from "@weighhouse/store/log";
import { createAuth } from "../auth";
import type { Auth } from "../auth";
import { createContext } from "../context";
import { hubOf } from "../event-hub";
import type { Context } from "../context";

export const ORIGIN = "http://localhost:3000";

export type TestServer = TestDesk & {
  auth: Auth;
  context(headers?: Headers): Promise<Context>;
  /** Signs somebody up; the headers that the browser sends from then on. */
  signUp(name: string): Promise<{ headers: Headers; email: string; userId: string }>;
};

export async function openTestServer(): Promise<TestServer> {
  const house = await openTestDesk();
  const { desk } = house;
  const auth = createAuth({ store: desk.store, origin: ORIGIN, secret: "s".repeat(32) });
  return {
    ...house,
    async close() {
      await hubOf(desk.store).close();
      await house.close();
    },
    auth,
    context: (headers = new Headers()) => createContext({ desk, auth, log: silentLog, headers }),
    async signUp(name) {
      const email = `${name.toLowerCase().replaceAll(" ", ".")}@people.example`;
      const response = await auth.handler(
        jsonRequest("/api/auth/sign-up/email", { name, email, password: "long enough 1" }),
      );
      const { user } = (await response.json()) as { user: { id: string } };
      return { headers: cookieHeaders(response), email, userId: user.id };
    },
  };
}

export function jsonRequest(path: string, body: unknown, headers: Record<string, string> = {}) {
  return new Request(`${ORIGIN}${path}`, {
    method: "POST",
    headers: { "content-type": "application/json", origin: ORIGIN, ...headers },
    body: JSON.stringify(body),
  });
}

/** The cookies that a response sets, as the browser sends them back. */
export function cookieHeaders(response: Response): Headers {
  const cookies = response.headers.getSetCookie().map((cookie) => cookie.split(";")[0]);
  return new Headers({ cookie: cookies.join("; ") });
}
