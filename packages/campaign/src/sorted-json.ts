/** JSON with sorted members, so that the order in which somebody wrote them says nothing. */
export function sortedJson(value: unknown): string {
  return JSON.stringify(value ?? null, (_name, inner: unknown) =>
    inner !== null && typeof inner === "object" && !Array.isArray(inner)
      ? Object.fromEntries(Object.entries(inner).sort(([a], [b]) => (a < b ? -1 : 1)))
      : inner,
  );
}
