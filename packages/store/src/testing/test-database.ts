export type TestDatabase = { url: string; adminUrl: string; drop(): Promise<void> };

/** A fresh migrated database, made from the run's template. */
export async function createTestDatabase(): Promise<TestDatabase> {
  throw new Error("the database of this run isn't started: use the vitest project `database`");
}
