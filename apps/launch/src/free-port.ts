import { createServer } from "node:net";

/** The first port from `wanted` on that nobody listens on. */
export async function freePort(wanted: number, host: string): Promise<number> {
  for (let port = wanted; port < Math.min(wanted + 200, 65_536); port += 1) {
    if (await isFree(port, host)) return port;
  }
  throw new Error(`no free port from ${wanted} on`);
}

function isFree(port: number, host: string): Promise<boolean> {
  return new Promise((resolve) => {
    const server = createServer();
    server.once("error", () => resolve(false));
    server.listen({ port, host, exclusive: true }, () => server.close(() => resolve(true)));
  });
}
