"use client";

import { useRouter } from "next/navigation";
import { authClient } from "./auth-client";

export function SignOut() {
  const router = useRouter();
  return (
    <button
      type="button"
      className="cursor-pointer text-quiet underline decoration-edge underline-offset-3 hover:text-ink"
      onClick={async () => {
        await authClient.signOut();
        router.push("/campaigns");
        router.refresh();
      }}
    >
      Sign out
    </button>
  );
}
