import { createServer } from "node:http";
import type { IncomingMessage, ServerResponse } from "node:http";
import type { AddressInfo } from "node:net";
import { Readable } from "node:stream";
import type { ReadableStream as NodeStream } from "node:stream/web";
import { makeApiKey } from "@weighhouse/desk/make-api-key";
import type { Actor } from "@weighhouse/desk/desk";
import type { Scope } from "@weighhouse/desk/scopes";
import { answerHttp } from "../http";
import type { TestServer } from "./test-server";

/** The HTTP API on a real socket, on a port of its own; bodies are streamed both ways. */
export async function serveApi(
  server: TestServer,
): Promise<{ url: string; close(): Promise<void> }> {
  const http = createServer((incoming, outgoing) => {
    void answer(server, incoming, outgoing).catch((error: unknown) => {
      outgoing.destroy(error instanceof Error ? error : new Error(String(error)));
    });
  });
  await new Promise<void>((resolve) => http.listen(0, "127.0.0.1", resolve));
  const { port } = http.address() as AddressInfo;
  return {
    url: `http://127.0.0.1:${port}`,
    close: () =>
      new Promise<void>((resolve, reject) => {
        http.close((error) => (error ? reject(error) : resolve()));
        http.closeAllConnections();
      }),
  };
}

/** A key of a campaign's member, as a program sends it. */
export async function keyOf(
  server: TestServer,
  key: string,
  options: { maker: Actor; scopes: Scope[] },
): Promise<{ authorization: string }> {
  const { maker, scopes } = options;
  const made = await makeApiKey(server.desk, maker, { key, title: "a test's", scopes });
  return { authorization: `Bearer ${made.text}` };
}

async function answer(server: TestServer, incoming: IncomingMessage, outgoing: ServerResponse) {
  const headers = new Headers();
  for (const [name, value] of Object.entries(incoming.headers)) {
    if (value !== undefined) headers.set(name, Array.isArray(value) ? value.join(", ") : value);
  }
  const gone = new AbortController();
  outgoing.on("close", () => gone.abort());
  const { method = "GET" } = incoming;
  const request = new Request(`http://${incoming.headers.host}${incoming.url}`, {
    method,
    headers,
    signal: gone.signal,
    ...(method === "GET" || method === "HEAD"
      ? {}
      : ({ body: Readable.toWeb(incoming), duplex: "half" } as object)),
  });
  const response = await answerHttp(await server.context(headers), request);
  outgoing.writeHead(response.status, Object.fromEntries(response.headers));
  if (response.body === null) outgoing.end();
  else Readable.fromWeb(response.body as unknown as NodeStream).pipe(outgoing);
}
