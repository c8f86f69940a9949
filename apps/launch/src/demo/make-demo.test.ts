import { mkdtempSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import { afterAll, beforeAll, expect, it } from "vitest";
import { openKeys, openSealKey } from "@weighhouse/store/keys";
import { openStore } from "@weighhouse/store/open-store";
import type { Store } from "@weighhouse/store/open-store";
import { readDocument } from "@weighhouse/store/read-document";
import { createTestDatabase } from "@weighhouse/store/testing/test-database";
import type { TestDatabase } from "@weighhouse/store/testing/test-database";
import { isDemoMade } from "./accounts";
import { makeDemo } from "./make-demo";
import type { DemoPlace } from "./make-demo";
import { demoKey } from "./scenario";

const origin = "http://localhost:3000";
const goOn = { aborted: false };
let whole: Home;
let cut: Home;

type Home = { database: TestDatabase; place: Omit<DemoPlace, "stopping">; store: Store };

async function openHome(): Promise<Home> {
  const database = await createTestDatabase();
  const home = mkdtempSync(path.join(tmpdir(), "demo-home-"));
  const keys = path.join(home, "keys");
  const signer = await openKeys({ folder: keys, name: "localhost", make: true });
  openSealKey({ folder: keys, make: true });
  const store = await openStore({ url: database.url, signer, connections: 2 });
  const place = { home, url: database.url, keys, origin, secret: "s".repeat(32) };
  return { database, place, store };
}

async function closeHome({ database, place, store }: Home): Promise<void> {
  await store.close();
  await database.drop();
  rmSync(place.home, { recursive: true });
}

/** Tells to stop at the given time of asking. */
const stopAt = (time: number) => {
  let asked = 0;
  return {
    get aborted() {
      asked += 1;
      return asked >= time;
    },
  };
};

beforeAll(async () => {
  [whole, cut] = await Promise.all([openHome(), openHome()]);
  await makeDemo({ ...whole.place, stopping: goOn });
});
afterAll(() => Promise.all([closeHome(whole), closeHome(cut)]));

it("a demo cut short is made whole by the next start, as if nothing had happened", async () => {
  // Among the declarations, before the members are added, and among the postings.
  for (const time of [9, 20, 14]) {
    await makeDemo({ ...cut.place, stopping: stopAt(time) });
    expect(isDemoMade(cut.place.home)).toBe(false);
  }
  await makeDemo({ ...cut.place, stopping: goOn });
  const [made, expected] = await Promise.all([
    readDocument(cut.store, demoKey),
    readDocument(whole.store, demoKey),
  ]);
  expect(made.size).toBe(expected.size);
  expect(made.document).toEqual(expected.document);
});

it("a demo that is whole is left as its users made it, also when they hid it", async () => {
  await whole.store.sql`update campaigns set visibility = 'members' where key = ${demoKey}`;
  const { size } = await readDocument(whole.store, demoKey);
  // As in a home of before the mark was kept.
  rmSync(path.join(whole.place.home, "demo-made"));
  await makeDemo({ ...whole.place, stopping: goOn });
  await makeDemo({ ...whole.place, stopping: goOn });
  expect((await readDocument(whole.store, demoKey)).size).toBe(size);
});
