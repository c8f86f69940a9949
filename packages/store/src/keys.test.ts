import { chmodSync, mkdtempSync, rmSync, statSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import { afterAll, describe, expect, it } from "vitest";
import { openKeys } from "./keys";

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
