/**
 * npm run demo:stream: the demo's observer signs in at the running server and posts the melt rate
 * that the campaign waits for, one reading every few seconds, as an observer's script would.
 */
import { createTRPCClient, httpLink } from "@trpc/client";
import type { AppRouter } from "@weighhouse/api/router";
import { defaultHome } from "@weighhouse/store/embedded";
import superjson from "superjson";
import { readDemoAccounts } from "./demo/accounts";
import { streamed } from "./demo/readings";
import { demoKey } from "./demo/scenario";
import { readAddress } from "./address";
import { say } from "./say";

const everyMs = 4_000;
const observer = "observer@demo.example";

async function main(): Promise<number> {
  const home = process.env.WEIGHHOUSE_HOME ?? defaultHome();
  const origin = readAddress(home);
  const accounts = readDemoAccounts(home);
  if (!origin || !accounts) {
    say(`no running server with a demo campaign is known under ${home}; npm start makes one`);
    return 1;
  }
  const cookie = await signIn(origin, accounts.password);
  const client = createTRPCClient<AppRouter>({
    links: [
      httpLink({
        url: `${origin}/api/trpc`,
        transformer: superjson,
        headers: { cookie, origin },
      }),
    ],
  });
  say(`posting to ${origin}/campaigns/${demoKey}`);
  for (const reading of streamed) {
    const observedAt = new Date().toISOString();
    const outcome = await client.measurements.post.mutate({
      key: demoKey,
      source: { from: "drafts", drafts: [{ ...reading, observedAt }] },
    });
    say(`posted ${reading.value} ± ${reading.sd} mm/yr as ${outcome.posted.join(", ")}`);
    await new Promise((resolve) => setTimeout(resolve, everyMs));
  }
  return 0;
}

async function signIn(origin: string, password: string): Promise<string> {
  const answer = await fetch(`${origin}/api/auth/sign-in/email`, {
    method: "POST",
    headers: { "content-type": "application/json", origin },
    body: JSON.stringify({ email: observer, password }),
  });
  if (!answer.ok)
    throw new Error(`signing in as ${observer}: ${answer.status} ${await answer.text()}`);
  return answer.headers
    .getSetCookie()
    .map((line) => line.split(";", 1)[0])
    .join("; ");
}

process.exit(await main());
