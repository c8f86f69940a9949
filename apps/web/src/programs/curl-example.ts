export interface Asked {
  method: string;
  /** Below the server's address, with names in braces. */
  path: string;
  /** Whether it works without a key where the campaign is public. */
  open: boolean;
  bodyType: string | null;
  once: boolean;
  answerType: string | null;
}

const files: Record<string, string> = {
  "application/json": "body.json",
  "application/x-ndjson": "rows.ndjson",
  "text/csv": "table.csv",
  "text/ecsv": "table.ecsv",
  "application/x-ecsv": "table.ecsv",
  "application/x-votable+xml": "table.vot",
};

/** How one asks it with curl: names in capitals are the reader's to fill in. */
export function curlExample(asked: Asked, server: string, campaign: string | null): string {
  const { method, path, open, bodyType, once, answerType } = asked;
  const address =
    server +
    path
      .replace("{key}", campaign ?? "CAMPAIGN")
      .replaceAll(/\{(\w+)\}/g, (_, name: string) => name.toUpperCase());
  const file = answerType === "application/zip" ? ["--remote-name --remote-header-name"] : [];
  const parts = [
    "curl",
    ...(method === "GET" || (method === "POST" && bodyType !== null)
      ? []
      : [`--request ${method}`]),
    ...(open ? [] : ['--header "Authorization: Bearer $WEIGHHOUSE_API_KEY"']),
    ...(once ? ['--header "Idempotency-Key: $(uuidgen)"'] : []),
    ...(bodyType === null
      ? []
      : [`--header "Content-Type: ${bodyType}"`, `--data-binary @${files[bodyType] ?? "body"}`]),
    ...file,
    address,
  ];
  return parts.join(" \\\n  ");
}
