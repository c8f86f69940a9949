import { createHash, randomBytes } from "node:crypto";
import { setTimeout as sleep } from "node:timers/promises";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { timeStampRequest } from "./request";
import { TestAuthority } from "./testing/authority";
import { certificatesOf, verifyToken } from "./verify-token";

// Checked against OpenSSL's `ts` command: it signs the tokens, and judges the good and altered ones too.

const sha256 = (bytes: Uint8Array) => new Uint8Array(createHash("sha256").update(bytes).digest());
const data = new TextEncoder().encode("ledger\n12\nroot\n");
const nonce = new Uint8Array(randomBytes(16));
const request = timeStampRequest(sha256(data), nonce);
let authority: TestAuthority;
let response: Uint8Array;
let trusted: string;
beforeAll(() => {
  authority = new TestAuthority();
  trusted = authority.root;
  response = authority.answer(request);
});
afterAll(() => authority.remove());

const reasonOf = async (...given: Parameters<typeof verifyToken>) => {
  const verdict = await verifyToken(...given);
  return verdict.ok ? "good" : verdict.reason;
};

describe("a time-stamp", () => {
  it("is good with its request, its bytes and its authority's root", async () => {
    expect(authority.verifies(response, data)).toBe(true);
    const verdict = await verifyToken(response, { data, sha256, nonce, trusted });
    expect(verdict).toMatchObject({ ok: true, authority: "Test authority" });
    const at = verdict.ok ? Date.parse(verdict.at) : 0;
    expect(Math.abs(Date.now() - at)).toBeLessThan(60_000);
    expect(await reasonOf(response, { data, sha256 })).toBe("good");
  });

  it("over other bytes is refused", async () => {
    const other = new TextEncoder().encode("ledger\n13\nroot\n");
    expect(await reasonOf(response, { data: other, sha256, trusted })).toBe(
      "it stamps other bytes",
    );
  });

  it("with another nonce is refused", async () => {
    const other = new Uint8Array(randomBytes(16));
    expect(await reasonOf(response, { data, sha256, nonce: other, trusted })).toContain("nonce");
  });

  it("whose chain ends at a root that isn't trusted is refused", async () => {
    const stranger = new TestAuthority("Stranger");
    const checks = { data, sha256, nonce, trusted: stranger.root };
    expect(await reasonOf(response, checks)).toMatch(/lead to none that you trust/);
    stranger.remove();
  });

  it("signed anew is good still: what is refused below is refused for its certificate", async () => {
    expect(await reasonOf(authority.resign(response), { data, sha256, nonce, trusted })).toBe(
      "good",
    );
  });

  it.each(["wrong_purpose_ext", "both_purposes_ext"])(
    "signed by a certificate of another purpose (%s) is refused",
    async (extensions) => {
      authority.certify(extensions);
      const token = authority.resign(response);
      authority.certify("tsa_ext");
      expect(await reasonOf(token, { data, sha256, nonce })).toBe(
        "the certificate of Test authority is not for time-stamping alone",
      );
    },
  );

  it("signed by an expired certificate is refused", async () => {
    authority.certify("tsa_ext", "0");
    await sleep(1100);
    const late = authority.answer(request);
    authority.certify("tsa_ext");
    expect(await reasonOf(late, { data, sha256, nonce })).toMatch(
      /^the certificate of Test authority was valid from .* not at /,
    );
  });

  it("with any byte changed is refused, or says the same: a few fields of the envelope are not signed", async () => {
    const said = await verifyToken(response, { data, sha256, nonce, trusted });
    // Every 37th byte: some 60 of them.
    for (let at = 5; at < response.length; at += 37) {
      const altered = response.map((byte, index) => (index === at ? byte ^ 1 : byte));
      const verdict = await verifyToken(altered, { data, sha256, nonce, trusted });
      if (verdict.ok) expect(verdict, `byte ${at}`).toEqual(said);
    }
  });

  it("that is none is refused, whatever it is", async () => {
    for (const bytes of ["", "stamped", "0\u0003\u0002\u0001\u0002"]) {
      const der = new TextEncoder().encode(bytes);
      expect(await reasonOf(der, { data, sha256 }), bytes).toMatch(/^no |^refused|^it can't/);
    }
    expect(() => certificatesOf("none")).toThrow("found no certificate");
  });

  it("that the authority refused says why", async () => {
    const wrong = timeStampRequest(new Uint8Array(31), nonce);
    expect(await reasonOf(authority.answer(wrong), { data, sha256 })).toMatch(
      /^refused by the authority: status 2/,
    );
  });
});
