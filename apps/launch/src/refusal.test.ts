import { expect, it } from "vitest";
import { connect } from "@weighhouse/store/open-store";
import { createTestDatabase } from "@weighhouse/store/testing/test-database";
import { refusalOf } from "./refusal";

async function errorFrom(url: string): Promise<unknown> {
  const sql = connect(url, 1);
  try {
    return await sql`select 1`.then(() => null);
  } catch (error) {
    return error;
  } finally {
    await sql.end({ timeout: 1 });
  }
}

it("a database that is not there, or lets nobody in, is refused in words", async () => {
  const database = await createTestDatabase();
  const [nobody, strange, unknown] = [1, 2, 3].map(() => new URL(database.url)) as [URL, URL, URL];
  nobody.port = "1";
  strange.password = "wrong";
  unknown.pathname = "/nowhere";
  for (const { href } of [nobody, unknown, strange]) {
    expect(refusalOf(await errorFrom(href))).toMatch(/^DATABASE_URL.*: the database/);
  }
  await database.drop();
});

it("a fault of the program's own stays one", () => {
  expect(refusalOf(new TypeError("x is not a function"))).toBeNull();
});
