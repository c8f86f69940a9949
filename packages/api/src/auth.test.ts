import { afterAll, beforeAll, expect, it } from "vitest";
import { createAuth } from "./auth";
import { cookieHeaders, jsonRequest, openTestServer, ORIGIN } from "./testing/test-server";
import type { TestServer } from "./testing/test-server";

let server: TestServer;
beforeAll(async () => {
  server = await openTestServer();
});
afterAll(() => server.close());

const credentials = { email: "ines.quay@people.example", password: "long enough 1" };

it("who signs up is signed in, and is the actor of what follows", async () => {
  const { headers } = await server.signUp("Ines Quay");
  expect((await server.context(headers)).actor).toMatchObject({ name: "Ines Quay" });
  expect((await server.context()).actor).toBeNull();
});

it("over plain HTTP the session's cookie is readable by no script, and not Secure", async () => {
  const response = await server.auth.handler(jsonRequest("/api/auth/sign-in/email", credentials));
  expect(response.status).toBe(200);
  const [cookie = ""] = response.headers.getSetCookie();
  expect(cookie).toMatch(/^weighhouse\.session_token=/);
  expect(cookie).toContain("HttpOnly");
  expect(cookie).toContain("SameSite=Lax");
  expect(cookie).not.toContain("Secure");
});

it("over HTTPS the session's cookie is Secure", async () => {
  const { store } = server.desk;
  const auth = createAuth({ store, origin: "https://house.example", secret: "s".repeat(32) });
  const request = new Request("https://house.example/api/auth/sign-in/email", {
    method: "POST",
    headers: { "content-type": "application/json", origin: "https://house.example" },
    body: JSON.stringify(credentials),
  });
  const [cookie = ""] = (await auth.handler(request)).headers.getSetCookie();
  expect(cookie).toMatch(/^__Secure-weighhouse\.session_token=/);
});

it("a wrong password is refused", async () => {
  const wrong = { ...credentials, password: "not the right one" };
  const response = await server.auth.handler(jsonRequest("/api/auth/sign-in/email", wrong));
  expect(response.status).toBe(401);
});

it("a password of fewer than ten characters is refused at sign-up", async () => {
  const short = { name: "Short", email: "short@people.example", password: "too short" };
  const response = await server.auth.handler(jsonRequest("/api/auth/sign-up/email", short));
  expect(response.status).toBe(400);
  expect(await response.json()).toMatchObject({ code: "PASSWORD_TOO_SHORT" });
});

it("signing out ends the session, also for who kept the cookie", async () => {
  const { headers } = await server.signUp("Otto Out");
  const cookie = headers.get("cookie") ?? "";
  await server.auth.handler(jsonRequest("/api/auth/sign-out", {}, { cookie }));
  expect((await server.context(headers)).actor).toBeNull();
});

it("a machine in the local network may sign in by the address that it calls", async () => {
  const host = "192.168.7.20:3000";
  const response = await signInFrom(`http://${host}`, host);
  expect(response.status).toBe(200);
});

it("a page of another origin may not, cookie or no cookie", async () => {
  const response = await signInFrom("http://elsewhere.example", "localhost:3000");
  expect(response.status).toBe(403);
});

it("the 31st sign-in of a minute from one address is refused, from another it isn't", async () => {
  const signInAt = async (address: string) => {
    const wrong = { email: "nobody@people.example", password: "not the right one" };
    const headers = { "x-forwarded-for": address };
    return (await server.auth.handler(jsonRequest("/api/auth/sign-in/email", wrong, headers)))
      .status;
  };
  for (let i = 0; i < 30; i++) expect(await signInAt("192.0.2.1")).toBe(401);
  expect(await signInAt("192.0.2.1")).toBe(429);
  expect(await signInAt("192.0.2.2")).toBe(401);
});

async function signInFrom(origin: string, host: string): Promise<Response> {
  const before = await server.auth.handler(jsonRequest("/api/auth/sign-in/email", credentials));
  const cookie = cookieHeaders(before).get("cookie") ?? "";
  const request = jsonRequest("/api/auth/sign-in/email", credentials, { origin, host, cookie });
  expect(new URL(request.url).origin).toBe(ORIGIN);
  return server.auth.handler(request);
}
