/**
 * Writes golden-digests.json, the digests of standings under the engine's version. Under a version
 * that has digests already they aren't replaced: other bytes are another version.
 *
 *   npm run golden --workspace test
 */
import { existsSync, readFileSync, writeFileSync } from "node:fs";
import { ENGINE_VERSION } from "@weighhouse/engine/version";
import { goldenCampaigns, standingsDigest, type GoldenDigests } from "./golden";

const file = new URL("golden-digests.json", import.meta.url);
const digests: Record<string, string> = {};
for (const [name, form] of Object.entries(goldenCampaigns)) digests[name] = standingsDigest(form);
const text = `${JSON.stringify({ engine: ENGINE_VERSION, digests } satisfies GoldenDigests, null, 2)}\n`;
const before = existsSync(file) ? readFileSync(file, "utf8") : null;
const engine = before === null ? null : (JSON.parse(before) as GoldenDigests).engine;
if (engine === ENGINE_VERSION && text !== before) {
  console.error(
    `Bytes changed under ${engine}: bump ENGINE_VERSION (packages/engine/src/version.ts).`,
  );
  process.exitCode = 1;
} else {
  writeFileSync(file, text);
  console.log(`${Object.keys(digests).length} digests of engine ${ENGINE_VERSION}`);
}
