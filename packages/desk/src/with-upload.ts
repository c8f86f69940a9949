import { clearUpload, openUpload } from "@weighhouse/store/uploads";
import type { Upload } from "@weighhouse/store/uploads";
import type { Access } from "./access";
import type { Desk } from "./desk";
import { DeskError } from "./desk-error";
import { onStore } from "./store-refusals";

/** An upload for one request alone: whatever becomes of it, nothing stays staged. */
export async function withUpload<T>(
  desk: Desk,
  access: Access,
  use: (upload: Upload) => Promise<T>,
): Promise<T> {
  const { member } = access;
  if (member === null) throw new DeskError("not-allowed", "found no membership");
  const campaign = access.campaign.key;
  const upload = await onStore(() => openUpload(desk.store, { campaign, member }));
  try {
    return await use(upload);
  } finally {
    await clearUpload(desk.store, upload);
  }
}
