import { expect, test } from "vitest";
import { ENGINE_VERSION } from "@weighhouse/engine/version";
import { goldenCampaigns, standingsDigest } from "./golden";
import golden from "./golden-digests.json";

const changed =
  "bytes changed: bump ENGINE_VERSION (packages/engine/src/version.ts) and run " +
  "`npm run golden --workspace test`";

test("the golden digests are of this engine's version", () => {
  expect(golden.engine, "run `npm run golden --workspace test`").toBe(ENGINE_VERSION);
  expect(Object.keys(golden.digests), changed).toEqual(Object.keys(goldenCampaigns));
});

test.each(Object.entries(goldenCampaigns))(
  "the standings of %s have the bytes that this engine's version stands for",
  (name, form) => {
    const found = standingsDigest(form);
    expect(found, changed).toBe((golden.digests as Record<string, string>)[name]);
  },
);

test("two runs give the same bytes, also where integrals are sampled", () => {
  for (const name of ["manyParameters", "sharedErrors"]) {
    const form = goldenCampaigns[name];
    expect(standingsDigest(structuredClone(form)), name).toBe(standingsDigest(form));
  }
});
