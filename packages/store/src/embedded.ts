import type { Log } from "./open-store";
import { StoreError } from "./store-error";

export type EmbeddedPostgres = {
  readonly adminUrl: string;
  readonly url: string;
  readonly port: number;
  stop(): Promise<void>;
};

/** Starts (or adopts) the embedded PostgreSQL with its data under `home`. */
export async function startEmbeddedPostgres(_options: {
  home: string;
  log: Log;
}): Promise<EmbeddedPostgres> {
  throw new StoreError("embedded-failed", "");
}
