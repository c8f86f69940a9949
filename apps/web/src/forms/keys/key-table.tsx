import type { ListedApiKey } from "@weighhouse/desk/list-api-keys";
import { Table } from "@/look/table";
import { Time } from "@/look/time";
import { RevokeKey } from "./revoke-key";
import { scopeWords } from "./scope-words";

/** Keys with what they may do and when they were last used; those that hold can be revoked. */
export function KeyTable(props: {
  campaign: string;
  keys: readonly ListedApiKey[];
  caption: string;
  /** Coordinators see everybody's: who made one is said then. */
  withMakers: boolean;
}) {
  const { campaign, keys, caption, withMakers } = props;
  return (
    <Table
      caption={caption}
      stackBelow="broad"
      head={
        <tr>
          <th scope="col">For</th>
          <th scope="col">Begins with</th>
          {withMakers ? <th scope="col">Made by</th> : null}
          <th scope="col">May</th>
          <th scope="col">Made</th>
          <th scope="col">Last used</th>
          <th scope="col">Ends</th>
          <th scope="col">
            <span className="sr-only">Action</span>
          </th>
        </tr>
      }
    >
      {keys.map((key) => (
        <tr key={key.id}>
          <th scope="row" className="font-medium [overflow-wrap:anywhere]">
            {key.title}
          </th>
          <td data-label="Begins with">
            <code>{key.begins}…</code>
          </td>
          {withMakers ? (
            <td data-label="Made by">{key.own ? "you" : (key.name ?? "a person forgotten")}</td>
          ) : null}
          <td data-label="May">{scopesInWords(key.scopes)}</td>
          <td data-label="Made">
            <Time at={key.madeAt} dateOnly />
          </td>
          <td data-label="Last used">
            {key.lastUsedAt === null ? "never" : <Time at={key.lastUsedAt} />}
          </td>
          <td data-label="Ends">
            <End of={key} />
          </td>
          <td>
            {key.state === "holds" ? (
              <RevokeKey campaign={campaign} id={key.id} title={key.title} />
            ) : null}
          </td>
        </tr>
      ))}
    </Table>
  );
}

function End({ of: { state, revokedAt, expiresAt } }: { of: ListedApiKey }) {
  if (state === "revoked" && revokedAt !== null) {
    return (
      <>
        revoked <Time at={revokedAt} dateOnly />
      </>
    );
  }
  if (expiresAt === null) return "when it is revoked";
  return (
    <>
      {state === "expired" ? "expired " : ""}
      <Time at={expiresAt} dateOnly />
    </>
  );
}

function scopesInWords(scopes: readonly string[]): string {
  const words = scopes.map((scope) => {
    const known = (scopeWords as Partial<Record<string, { label: string }>>)[scope];
    return known?.label ?? scope;
  });
  return words.join(", ").toLowerCase();
}
