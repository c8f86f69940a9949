"use client";

import { useEffect, useRef, useState } from "react";
import { Button } from "@/look/button";
import { Notice } from "@/look/notice";

/** A key, this once, with a button that copies it; the button has the focus, so Enter copies. */
export function KeyShown({ title, text }: { title: string; text: string }) {
  const shown = useRef<HTMLElement>(null);
  const copy = useRef<HTMLButtonElement>(null);
  const [said, setSaid] = useState("");
  useEffect(() => copy.current?.focus(), []);
  return (
    <div className="mb-4 rounded-sheet border border-fir bg-paper p-3">
      <Notice tone="good" label="Made.">
        This is the key for {title}. It is shown this once: copy it now, to where the program reads
        it. If it is lost, make another and revoke this one.
      </Notice>
      <p className="mb-2 max-w-none break-all rounded-sheet border border-rule bg-sheet px-2.5 py-1.5">
        <code ref={shown} data-api-key>
          {text}
        </code>
      </p>
      <div className="flex flex-wrap items-center gap-3">
        <Button
          ref={copy}
          kind="main"
          onClick={() => void copyOrSelect(text, shown.current).then(setSaid)}
        >
          Copy key
        </Button>
        <output className="text-[14px] text-quiet">{said}</output>
      </div>
    </div>
  );
}

/** Browsers give pages the clipboard over HTTPS and on this machine alone: else it is marked. */
async function copyOrSelect(text: string, shown: HTMLElement | null): Promise<string> {
  try {
    await navigator.clipboard.writeText(text);
    return "Copied.";
  } catch {
    if (shown !== null) window.getSelection()?.selectAllChildren(shown);
    return "It is marked: copy it with Ctrl or ⌘ and C.";
  }
}
