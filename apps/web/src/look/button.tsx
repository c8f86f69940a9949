import Link from "next/link";
import type { ComponentProps } from "react";

const base =
  "inline-flex min-h-9 items-center justify-center gap-2 rounded-sheet border px-3.5 py-1.5 font-medium no-underline disabled:cursor-not-allowed disabled:opacity-55";
const kinds = {
  main: "border-ink bg-ink text-paper hover:bg-transparent hover:text-ink disabled:hover:bg-ink disabled:hover:text-paper",
  plain: "border-edge bg-sheet text-ink hover:border-ink",
  quiet: "border-transparent text-ink hover:border-edge",
  grave: "border-rust bg-sheet text-rust hover:bg-rust hover:text-sheet",
} as const;

type Kind = keyof typeof kinds;

export function Button({
  kind = "plain",
  className = "",
  type = "button",
  ...rest
}: ComponentProps<"button"> & { kind?: Kind }) {
  return <button type={type} className={`${base} ${kinds[kind]} ${className}`} {...rest} />;
}

export function ButtonLink({
  kind = "plain",
  className = "",
  ...rest
}: ComponentProps<typeof Link> & { kind?: Kind }) {
  return <Link className={`${base} ${kinds[kind]} ${className}`} {...rest} />;
}
