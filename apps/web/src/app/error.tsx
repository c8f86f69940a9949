"use client";

import { Button } from "@/look/button";
import { Notice } from "@/look/notice";

export default function PageError({
  error,
  reset,
}: {
  error: Error & { digest?: string };
  reset: () => void;
}) {
  return (
    <div className="py-8">
      <h1 className="mb-3">This page could not be made</h1>
      <Notice tone="bad" role="alert">
        Something failed on the way to it; nothing was changed.
        {error.digest ? ` The server's log has it under ${error.digest}.` : ""}
      </Notice>
      <div className="mt-4">
        <Button kind="main" onClick={reset}>
          Try again
        </Button>
      </div>
    </div>
  );
}
