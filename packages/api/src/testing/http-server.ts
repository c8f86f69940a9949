import { createServer } from "node:http";
import type { AddressInfo } from "node:net";
import { createHTTPHandler } from "@trpc/server/adapters/standalone";
import { appRouter } from "../router";
import type { TestServer } from "./test-server";

/** The router over real HTTP, on a port of its own. */
export async function serveHttp(
  server: TestServer,
): Promise<{ url: string; close(): Promise<void> }> {
  const http = createServer(
    createHTTPHandler({
      router: appRouter,
      createContext: ({ req }) =>
        server.context(new Headers(req.headers.cookie ? { cookie: req.headers.cookie } : {})),
    }),
  );
  await new Promise<void>((resolve) => http.listen(0, "127.0.0.1", resolve));
  const { port } = http.address() as AddressInfo;
  return {
    url: `http://127.0.0.1:${port}`,
    close: () =>
      new Promise<void>((resolve, reject) => {
        http.close((error) => (error ? reject(error) : resolve()));
      }),
  };
}

export type StreamEvent = { at: number; event: string | null; id: string | null; data: string };

/** Reads server-sent events (WHATWG HTML, section 9.2) from an open response. */
export async function* readStream(response: Response): AsyncGenerator<StreamEvent> {
  let rest = "";
  const decoder = new TextDecoder();
  for await (const chunk of response.body!) {
    rest += decoder.decode(chunk as Uint8Array, { stream: true });
    const blocks = rest.split("\n\n");
    rest = blocks.pop()!;
    for (const block of blocks) {
      const field = (name: string) =>
        block
          .split("\n")
          .filter((line) => line.startsWith(`${name}:`))
          .map((line) => line.slice(name.length + 1).trim())
          .join("\n");
      if (field("data") === "" && field("event") === "") continue;
      yield {
        at: performance.now(),
        event: field("event") || null,
        id: field("id") || null,
        data: field("data"),
      };
    }
  }
}
