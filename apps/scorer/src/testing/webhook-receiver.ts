import { createHash, createHmac, timingSafeEqual } from "node:crypto";
import { createServer } from "node:http";
import type { IncomingHttpHeaders, Server } from "node:http";
import type { AddressInfo } from "node:net";

export type Received = { method: string; url: string; headers: IncomingHttpHeaders; body: string };

/** Somebody's server on loopback that takes what it is sent, or answers as it is told to. */
export class WebhookReceiver {
  readonly received: Received[] = [];
  /** The status of its answers; null: it takes the request and never answers. */
  status: number | null = 204;
  headers: Record<string, string> = {};
  #server: Server | null = null;
  #port = 0;

  /** Always on the same port, once it had one. */
  async up(): Promise<void> {
    this.#server = createServer((request, response) => {
      let body = "";
      request.setEncoding("utf8");
      request.on("data", (text: string) => (body += text));
      request.on("end", () => {
        const { method = "", headers } = request;
        this.received.push({ method, url: `${this.origin}${request.url}`, headers, body });
        if (this.status !== null) response.writeHead(this.status, this.headers).end();
      });
    });
    await new Promise<void>((resolve) => {
      this.#server!.listen(this.#port, "127.0.0.1", () => resolve());
    });
    this.#port = (this.#server.address() as AddressInfo).port;
  }

  async down(): Promise<void> {
    const server = this.#server;
    this.#server = null;
    server?.closeAllConnections();
    await new Promise<void>((resolve) => {
      if (server === null) resolve();
      else server.close(() => resolve());
    });
  }

  get origin(): string {
    return `http://127.0.0.1:${this.#port}`;
  }
}

/**
 * Whether a message is signed with a secret, by RFC 9421 sections 2.5 and 3.2 as they are written:
 * the signature base made from the message, and its HMAC (section 3.3.3) beside the one that came.
 */
export function isSigned({ method, url, headers }: Received, secret: string | Buffer): boolean {
  const input = String(headers["signature-input"]);
  const [, label, parameters = "", names = ""] = /^(\S+?)=(\(([^)]*)\).*)$/.exec(input) ?? [];
  const value = (name: string) => {
    if (name === "@method") return method;
    if (name === "@target-uri") return url;
    if (name === "@authority") return new URL(url).host;
    return String(headers[name]);
  };
  const covered = [...names.matchAll(/"([^"]+)"/g)].map(([, name]) => name!);
  const lines = covered.map((name) => `"${name}": ${value(name)}`);
  const base = [...lines, `"@signature-params": ${parameters}`].join("\n");
  const mine = createHmac("sha256", secret).update(base).digest();
  const theirs = Buffer.from(String(headers["signature"]).slice(`${label}=:`.length, -1), "base64");
  return theirs.length === mine.length && timingSafeEqual(theirs, mine);
}

/** RFC 9530: the digest of exactly these bytes. */
export function hasDigest({ headers, body }: Received): boolean {
  const digest = createHash("sha256").update(body).digest("base64");
  return headers["content-digest"] === `sha-256=:${digest}:`;
}
