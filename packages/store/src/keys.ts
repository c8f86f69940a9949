import type { TreeHeadSigner } from "@weighhouse/ledger/tree-head";
import { StoreError } from "./store-error";

/** Reads the signing key of a folder; with `make`, makes folder and key if there is none. */
export async function openKeys(options: {
  folder: string;
  /** Key name of the signature lines: the server's name without scheme. */
  name: string;
  make: boolean;
}): Promise<TreeHeadSigner> {
  throw new StoreError("bad-keys", options.folder);
}
