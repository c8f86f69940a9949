import { expect, it } from "vitest";
import { curlExample } from "./curl-example";

const read = {
  method: "GET",
  path: "/campaigns/{key}/ledger/entries/{seq}",
  open: true,
  bodyType: null,
  once: false,
  answerType: "application/json",
};

it("what a public campaign gives is asked without a key", () => {
  expect(curlExample(read, "https://house.example/api/v1", "hum")).toBe(
    "curl \\\n  https://house.example/api/v1/campaigns/hum/ledger/entries/SEQ",
  );
});

it("what enters something is sent with a key, its type and a key of its own", () => {
  const path = "/campaigns/{key}/measurements";
  const post = { ...read, method: "POST", path, open: false, bodyType: "text/csv", once: true };
  expect(curlExample(post, "https://house.example/api/v1", null).split(" \\\n  ")).toEqual([
    "curl",
    '--header "Authorization: Bearer $WEIGHHOUSE_API_KEY"',
    '--header "Idempotency-Key: $(uuidgen)"',
    '--header "Content-Type: text/csv"',
    "--data-binary @table.csv",
    "https://house.example/api/v1/campaigns/CAMPAIGN/measurements",
  ]);
});

it("a method that curl doesn't take from the rest is named", () => {
  const path = "/campaigns/{key}/webhooks/{id}";
  const gone = { ...read, method: "DELETE", path, open: false };
  expect(curlExample(gone, "", "hum")).toContain("--request DELETE");
  const test = { ...gone, method: "POST" };
  expect(curlExample(test, "", "hum")).toContain("--request POST");
});
