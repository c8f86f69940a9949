"use client";

import { useRouter } from "next/navigation";

const choices = ["system", "light", "dark"] as const;
type Choice = (typeof choices)[number];

/** Day, night, or as the system wishes; kept in a cookie so that the server paints it at once. */
export function ThemeSwitch({ current }: { current: Choice }) {
  const router = useRouter();
  const choose = (choice: Choice) => {
    // oxlint-disable-next-line unicorn/no-document-cookie -- the Cookie Store API is missing on plain HTTP
    document.cookie = `theme=${choice}; path=/; max-age=31536000; samesite=lax`;
    if (choice === "system") document.documentElement.removeAttribute("data-theme");
    else document.documentElement.dataset["theme"] = choice;
    router.refresh();
  };
  return (
    <label className="text-[13.5px] text-quiet">
      <span className="sr-only">Light or dark</span>
      <select
        defaultValue={current}
        onChange={(event) => choose(event.target.value as Choice)}
        className="rounded-sheet border border-rule bg-paper px-1.5 py-0.5 text-quiet"
      >
        <option value="system">as the system</option>
        <option value="light">light</option>
        <option value="dark">dark</option>
      </select>
    </label>
  );
}
