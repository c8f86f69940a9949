import "server-only";
import { createContext } from "@weighhouse/api/context";
import { appRouter } from "@weighhouse/api/router";
import { DeskError } from "@weighhouse/desk/desk-error";
import type { Actor } from "@weighhouse/desk/desk";
import { headers } from "next/headers";
import { notFound, redirect } from "next/navigation";
import { cache } from "react";
import { services } from "./services";

/** The API, called in this process for the reader of this request; one a request. */
const readApi = cache(async () => {
  const { desk, auth, log } = await services();
  const context = await createContext({ desk, auth, log, headers: await headers() });
  const { actor, origin } = context;
  return { caller: appRouter.createCaller(context), actor, origin };
});

export async function readActor(): Promise<Actor> {
  return (await readApi()).actor;
}

/** Where people reach this server, as it was set. */
export async function readOrigin(): Promise<string> {
  return (await readApi()).origin;
}

export type Caller = Awaited<ReturnType<typeof readApi>>["caller"];

/**
 * Runs one read for a page. What isn't there becomes the page for that; who must sign in first is
 * sent there and comes back to `path`.
 */
export async function readFor<T>(path: string, read: (caller: Caller) => Promise<T>): Promise<T> {
  const { caller } = await readApi();
  try {
    return await read(caller);
  } catch (error) {
    const refusal = refusalOf(error);
    if (refusal?.code === "not-found" || refusal?.code === "not-allowed") notFound();
    if (refusal?.code === "not-signed-in") redirect(`/sign-in?next=${encodeURIComponent(path)}`);
    throw error;
  }
}

/** The desk's refusal in what a call threw; null where it was something else. */
export function refusalOf(error: unknown): DeskError | null {
  const cause = error instanceof Error && error.cause ? error.cause : error;
  return cause instanceof DeskError ? cause : null;
}
