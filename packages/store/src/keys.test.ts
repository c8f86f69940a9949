import { chmodSync, mkdtempSync, rmSync, statSync, truncateSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import { afterAll, describe, expect, it } from "vitest";
import { openKeys, openSealKey } from "./keys";
import { decryptSealed, encryptSealed } from "./seal-key";

const parent = mkdtempSync(path.join(tmpdir(), "weighhouse-keys-"));
afterAll(() => rmSync(parent, { recursive: true, force: true }));
const folder = path.join(parent, "keys");

describe("the keys' folder", () => {
  it("is made only where that is asked for", async () => {
    await expect(openKeys({ folder, name: "house.example", make: false })).rejects.toMatchObject({
      code: "bad-keys",
    });
    const made = await openKeys({ folder, name: "house.example", make: true });
    expect(made.name).toBe("house.example");
    expect(statSync(folder).mode & 0o777).toBe(0o700);
    expect(statSync(path.join(folder, "tree-heads.pem")).mode & 0o777).toBe(0o600);
  });

  it("keeps key and name: another name later changes neither", async () => {
    const first = await openKeys({ folder, name: "house.example", make: true });
    const later = await openKeys({ folder, name: "other.example", make: false });
    expect(later.name).toBe(first.name);
    expect(later.publicKey).toEqual(first.publicKey);
  });

  it("is refused where others can read the private key", async () => {
    chmodSync(path.join(folder, "tree-heads.pem"), 0o640);
    await expect(openKeys({ folder, name: "house.example", make: false })).rejects.toMatchObject({
      code: "bad-keys",
      message: expect.stringContaining("640") as string,
    });
  });
});

describe("the key of held seals", () => {
  const file = path.join(folder, "seals.key");

  it("lies beside the signing key, made only where that is asked for", () => {
    expect(openSealKey({ folder, make: false })).toBeNull();
    const made = openSealKey({ folder, make: true })!;
    expect(made.bytes).toHaveLength(32);
    expect(statSync(file).mode & 0o777).toBe(0o600);
    expect(openSealKey({ folder, make: false })).toEqual(made);
  });

  it("opens what it encrypted, for that seal alone, unaltered", () => {
    const key = openSealKey({ folder, make: false })!;
    const place = { campaign: "dune", digest: "5e".repeat(32) };
    const encrypted = encryptSealed(key, place, "sixty");
    expect(Buffer.from(encrypted).includes("sixty")).toBe(false);
    expect(encryptSealed(key, place, "sixty")).not.toEqual(encrypted);
    expect(decryptSealed(key, place, encrypted)).toBe("sixty");
    for (const other of [
      { ...place, campaign: "dunes" },
      { ...place, digest: "00".repeat(32) },
    ]) {
      expect(() => decryptSealed(key, other, encrypted)).toThrow("doesn't open");
    }
    for (const index of encrypted.keys()) {
      const altered = Uint8Array.from(encrypted, (byte, at) => (at === index ? byte ^ 1 : byte));
      expect(() => decryptSealed(key, place, altered)).toThrow("doesn't open");
    }
  });

  it("is refused where others can read it, or where it is cut short", () => {
    chmodSync(file, 0o644);
    expect(() => openSealKey({ folder, make: false })).toThrow("644");
    chmodSync(file, 0o600);
    truncateSync(file, 31);
    expect(() => openSealKey({ folder, make: false })).toThrow("31 bytes; allowed is 32");
  });
});
