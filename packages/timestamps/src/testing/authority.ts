import { execFileSync } from "node:child_process";
import { copyFileSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { createServer } from "node:http";
import type { AddressInfo } from "node:net";
import { tmpdir } from "node:os";
import path from "node:path";
import { fileURLToPath } from "node:url";

const config = fileURLToPath(new URL("tsa.cnf", import.meta.url));

/**
 * A time-stamp authority of openssl's (`openssl ts`) with certificates made for the run. It refuses
 * to sign by a certificate that isn't for time-stamping: `resign` does it by `openssl cms`.
 */
export class TestAuthority {
  readonly folder = mkdtempSync(path.join(tmpdir(), "weighhouse-tsa-"));

  constructor(name = "Test authority") {
    copyFileSync(config, path.join(this.folder, "tsa.cnf"));
    writeFileSync(path.join(this.folder, "tsaserial"), "01\n");
    this.#openssl(
      "req -x509 -newkey ec -pkeyopt ec_paramgen_curve:P-256 -nodes -keyout ca.key -out ca.crt -days 3650 -config tsa.cnf -extensions ca_ext -subj",
      `/CN=${name} root`,
    );
    this.#openssl(
      "req -new -newkey rsa:2048 -nodes -keyout tsa.key -out tsa.csr -config tsa.cnf -subj",
      `/CN=${name}`,
    );
    this.certify("tsa_ext");
  }

  /** PEM of its root. */
  get root(): string {
    return readFileSync(path.join(this.folder, "ca.crt"), "utf8");
  }

  /** Gives the signer's key a certificate. */
  certify(extensions: string, days = "3650"): void {
    this.#openssl(
      `x509 -req -in tsa.csr -CA ca.crt -CAkey ca.key -CAcreateserial -days ${days} -extfile tsa.cnf -extensions ${extensions} -out tsa.crt`,
    );
  }

  /** Answers a request (DER) as `openssl ts -reply` does. */
  answer(request: Uint8Array): Uint8Array {
    writeFileSync(path.join(this.folder, "req.tsq"), request);
    this.#openssl("ts -reply -config tsa.cnf -section tsa1 -queryfile req.tsq -out resp.tsr");
    return new Uint8Array(readFileSync(path.join(this.folder, "resp.tsr")));
  }

  /** The token of a response, signed anew by the certificate that the authority has now. */
  resign(response: Uint8Array): Uint8Array {
    writeFileSync(path.join(this.folder, "signed.tsr"), response);
    this.#openssl("ts -reply -in signed.tsr -token_out -out signed.der");
    this.#openssl("cms -verify -noverify -inform DER -in signed.der -out info.der");
    this.#openssl(
      "cms -sign -binary -nodetach -md sha256 -econtent_type 1.2.840.113549.1.9.16.1.4 -in info.der -signer tsa.crt -inkey tsa.key -outform DER -out resigned.der",
    );
    return new Uint8Array(readFileSync(path.join(this.folder, "resigned.der")));
  }

  /** The words of `openssl ts -verify`: a second opinion on a token. */
  verifies(response: Uint8Array, data: Uint8Array): boolean {
    writeFileSync(path.join(this.folder, "check.tsr"), response);
    writeFileSync(path.join(this.folder, "data"), data);
    try {
      this.#openssl("ts -verify -data data -in check.tsr -CAfile ca.crt");
      return true;
    } catch {
      return false;
    }
  }

  /** Serves it on loopback as RFC 3161 section 3.4 has it. */
  async serve(): Promise<{ url: string; close(): Promise<void> }> {
    const server = createServer((request, response) => {
      const chunks: Buffer[] = [];
      request.on("data", (chunk: Buffer) => chunks.push(chunk));
      request.on("end", () => {
        response.setHeader("content-type", "application/timestamp-reply");
        response.end(this.answer(Buffer.concat(chunks)));
      });
    });
    await new Promise<void>((resolve) => server.listen(0, "127.0.0.1", resolve));
    const { port } = server.address() as AddressInfo;
    return {
      url: `http://127.0.0.1:${port}/`,
      close: () => new Promise((resolve) => server.close(() => resolve())),
    };
  }

  remove(): void {
    rmSync(this.folder, { recursive: true, force: true });
  }

  #openssl(words: string, ...more: string[]): void {
    execFileSync("openssl", [...words.split(" "), ...more], { cwd: this.folder, stdio: "pipe" });
  }
}
