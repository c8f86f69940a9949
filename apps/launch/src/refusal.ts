import { StoreError } from "@weighhouse/store/store-error";

/** The database's own words that name what to set right; SQLSTATE codes of classes 28 and 3D. */
const refusedByDatabase = /^(28|3D)/;
const unreachable = ["ECONNREFUSED", "ENOTFOUND", "EAI_AGAIN", "ETIMEDOUT", "CONNECT_TIMEOUT"];

/** What to say of an error that whoever starts this can mend; null for one of ours. */
export function refusalOf(error: unknown): string | null {
  if (error instanceof StoreError) return error.message;
  const { code, message } = error as { code?: unknown; message?: unknown };
  if (typeof code !== "string") return null;
  const known = unreachable.includes(code) || refusedByDatabase.test(code);
  return known
    ? `DATABASE_URL, DATABASE_ADMIN_URL: the database does not answer: ${message}`
    : null;
}
