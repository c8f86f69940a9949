import { rateRows } from "@weighhouse/api/http/rate-classes";
import Link from "next/link";
import { Table } from "@/look/table";

/** What holds for every operation. */
export function CommonRules({ campaign }: { campaign: string | null }) {
  return (
    <dl className="facts">
      <dt>Who asks</dt>
      <dd>
        Public campaigns are read by everyone. For the rest send{" "}
        <code>Authorization: Bearer weighhouse_…</code> with a key of the campaign, made on{" "}
        {campaign === null ? (
          "its page of keys"
        ) : (
          <Link className="link" href={`/campaigns/${campaign}/keys`}>
            its page of keys
          </Link>
        )}
        . A key acts as who made it, in that campaign alone, within its scopes.
      </dd>
      <dt>All or nothing</dt>
      <dd>
        What is posted is entered whole, or refused whole with everything that is wrong with it.
      </dd>
      <dt>Again, safely</dt>
      <dd>
        <code>Idempotency-Key: NAME</code> on a POST that enters something: the same again is
        answered as the first time, for a day, with <code>Idempotency-Replayed: true</code>. Another
        body under the same name is refused with 422, one that comes while the first is worked on
        with 409.
      </dd>
      <dt>Only what is new</dt>
      <dd>
        Every GET has an <code>ETag</code>; sent back in <code>If-None-Match</code>, what is still
        so is answered with 304 and nothing else.
      </dd>
      <dt>Refusals</dt>
      <dd>
        <code>application/problem+json</code> (RFC 9457): <code>code</code> for programs,{" "}
        <code>detail</code> with what was found and what is allowed, <code>problems</code> with a
        JSON Pointer to each place.
      </dd>
      <dt>How fast</dt>
      <dd>
        Past so many requests a minute the answer is 429, with the seconds to wait in{" "}
        <code>Retry-After</code>; <code>RateLimit</code> tells with every answer how many are left.
      </dd>
    </dl>
  );
}

export function RateTable() {
  return (
    <Table
      caption="Requests a minute"
      head={
        <tr>
          <th scope="col">Requests a minute</th>
          <th scope="col" className="number">
            by key
          </th>
          <th scope="col" className="number">
            by account
          </th>
          <th scope="col" className="number">
            by address
          </th>
        </tr>
      }
    >
      {rateRows().map(({ rate, key, user, address }) => (
        <tr key={rate}>
          <th scope="row">{rateWords[rate]}</th>
          <td data-label="by key" className="number">
            {rate === "bad-key" ? "" : key}
          </td>
          <td data-label="by account" className="number">
            {rate === "bad-key" ? "" : user}
          </td>
          <td data-label="by address" className="number">
            {address}
          </td>
        </tr>
      ))}
    </Table>
  );
}

const rateWords: Record<ReturnType<typeof rateRows>[number]["rate"], string> = {
  read: "Reading",
  write: "Entering",
  part: "Parts of an upload",
  heavy: "Standings, archives, previews",
  "bad-key": "With keys that open nothing",
};
