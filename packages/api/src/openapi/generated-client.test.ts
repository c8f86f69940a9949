import { execFile } from "node:child_process";
import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from "node:fs";
import path from "node:path";
import { fileURLToPath } from "node:url";
import { build } from "esbuild";
import { afterAll, beforeAll, expect, it } from "vitest";
import { registerHypothesis } from "@weighhouse/desk/register-hypothesis";
import { hypothesis, openLagoon } from "@weighhouse/desk/testing/lagoon";
import type { Lagoon } from "@weighhouse/desk/testing/lagoon";
import { keyOf, serveApi } from "../testing/serve-api";
import { openTestServer } from "../testing/test-server";
import type { TestServer } from "../testing/test-server";

const root = fileURLToPath(new URL("../../../../", import.meta.url));
// Below this package, so that the generator's runtime is found from there.
const modules = path.join(root, "packages/api/node_modules");
mkdirSync(modules, { recursive: true });
const folder = mkdtempSync(path.join(modules, ".client-"));
let server: TestServer;
let lagoon: Lagoon;
let api: Awaited<ReturnType<typeof serveApi>>;

beforeAll(async () => {
  server = await openTestServer();
  lagoon = await openLagoon(server);
  await registerHypothesis(server.desk, lagoon.member, {
    key: lagoon.key,
    hypothesis: hypothesis("algae", 40),
  });
  api = await serveApi(server);
});
afterAll(async () => {
  await api.close();
  await server.close();
  rmSync(folder, { recursive: true, force: true });
});

/** A program as somebody would write it against the generated client. */
const PROGRAM = `
import * as client from "./client";
client.defaults.baseUrl = process.env.API_URL + "/api/v1";
client.defaults.headers = { authorization: process.env.API_KEY! };
const key = "lagoon-glow";
const measurement = {
  id: "by-client",
  measurand: "new-moon",
  facility: "pier",
  observedAt: "2026-02-03T22:00:00Z",
  value: 41,
  sd: 2,
};
const body = { key, idempotencyKey: "client-1", postMeasurementsBody: measurement };
const posted = await client.postMeasurements(body);
const again = await client.postMeasurements(body);
const document = await client.getDocument({ key });
const standings = await client.getStandings({ key });
const verdicts = await client.getVerdicts({ key });
const entry = await client.getLedgerEntriesBySeq({ key, seq: posted.entries!.from });
const refused = await client
  .postMeasurements({ key, postMeasurementsBody: { ...measurement, id: "no", sd: -1 } })
  .catch((error: { status: number; data: client.Problem }) => error);
console.log(
  JSON.stringify({
    posted: posted.posted,
    again: again.posted,
    ids: document.measurements!.map(({ id }) => id),
    counted: standings.measurements.counted,
    verdicts: verdicts.verdicts.length,
    kind: entry.entry.kind,
    refused: "status" in refused ? [refused.status, refused.data.problems![0]!.pointer] : null,
  }),
);
`;

it("a client made by a public generator (oazapfts) compiles, posts and reads", async () => {
  const description = path.join(folder, "openapi.json");
  const given = await fetch(`${api.url}/api/v1/openapi.json`);
  writeFileSync(description, await given.text());
  const generator = path.join(root, "node_modules/oazapfts/dist/cli.js");
  const client = path.join(folder, "client.ts");
  await run(generator, "--optimistic", "--argumentStyle=object", description, client);
  const program = path.join(folder, "program.ts");
  writeFileSync(program, PROGRAM);
  const options = { module: "esnext", moduleResolution: "bundler", target: "es2022" };
  const compilerOptions = {
    ...options,
    strict: true,
    noEmit: true,
    skipLibCheck: true,
    types: ["node"],
  };
  const project = path.join(folder, "tsconfig.json");
  writeFileSync(project, JSON.stringify({ compilerOptions, files: ["program.ts"] }));
  await run(path.join(root, "node_modules/typescript/bin/tsc"), "-p", project);
  const outfile = path.join(folder, "program.mjs");
  await build({ entryPoints: [program], outfile, bundle: true, platform: "node", format: "esm" });

  const { authorization } = await keyOf(server, lagoon.key, {
    maker: lagoon.member,
    scopes: ["read", "measurements:post"],
  });
  const said = await run(outfile, { API_URL: api.url, API_KEY: authorization });
  expect(JSON.parse(said)).toEqual({
    posted: 1,
    again: 1,
    ids: ["by-client"],
    counted: 1,
    verdicts: 1,
    kind: "measurements.posted",
    refused: [422, "/sd"],
  });
}, 60_000);

/** Runs a program in a process of its own; what it says. */
function run(file: string, ...given: (string | Record<string, string>)[]): Promise<string> {
  const args = given.filter((one) => typeof one === "string");
  const more = given.filter((one) => typeof one === "object");
  const env = Object.assign({}, process.env, ...more) as NodeJS.ProcessEnv;
  return new Promise((resolve, reject) => {
    execFile(process.execPath, [file, ...args], { env }, (error, out, err) => {
      if (error) reject(new Error(`${file}: ${out}${err}`));
      else resolve(out);
    });
  });
}
