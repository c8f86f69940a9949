import { expect, it } from "vitest";
import { silentLog } from "@weighhouse/store/log";
import { server } from "./server";

it("a process that lacks settings says which", async () => {
  await expect(
    server({ DATABASE_URL: "postgres://somewhere/house" } as never, silentLog),
  ).rejects.toThrow("found WEIGHHOUSE_KEYS and WEIGHHOUSE_SECRET not set");
});

it("a setting that is wrong is refused by name, and the next request tries again", async () => {
  const wrong = { WEIGHHOUSE_SECRET: "short" } as never;
  await expect(server(wrong, silentLog)).rejects.toThrow("WEIGHHOUSE_SECRET");
  await expect(server({} as never, silentLog)).rejects.toThrow("found DATABASE_URL and");
});
