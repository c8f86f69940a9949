"use client";

import { authClient } from "./auth-client";

export function SignOut() {
  return (
    <button
      type="button"
      className="cursor-pointer text-quiet underline decoration-edge underline-offset-3 hover:text-ink"
      onClick={async () => {
        await authClient.signOut();
        // A whole page load: nothing that was fetched as this person stays.
        window.location.assign("/campaigns");
      }}
    >
      Sign out
    </button>
  );
}
