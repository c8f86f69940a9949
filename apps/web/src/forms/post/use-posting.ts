"use client";

import type { MeasurementsPreview } from "@weighhouse/desk/preview-measurements";
import type { AppRouter } from "@weighhouse/api/router";
import type { inferRouterInputs, inferRouterOutputs } from "@trpc/server";
import { useRouter } from "next/navigation";
import { useState } from "react";
import { useTRPCClient } from "@/trpc/client";
import { refusalOf, type Refusal } from "../refusal";

export type Source = inferRouterInputs<AppRouter>["measurements"]["preview"]["source"];
export type Posted = inferRouterOutputs<AppRouter>["measurements"]["post"];

interface State {
  busy: "previewing" | "posting" | null;
  /** The preview, and the very source that it is of: only that is posted. */
  previewed: { source: Source; preview: MeasurementsPreview } | null;
  posted: Posted | null;
  refusal: Refusal | null;
}

const idle: State = { busy: null, previewed: null, posted: null, refusal: null };

/** First a preview, then all of it or nothing; what is posted is exactly what was previewed. */
export function usePosting(campaign: string) {
  const client = useTRPCClient();
  const router = useRouter();
  const [state, setState] = useState<State>(idle);

  const preview = async (source: Source): Promise<void> => {
    setState({ ...idle, busy: "previewing" });
    try {
      const found = await client.measurements.preview.mutate({ key: campaign, source });
      setState({ ...idle, previewed: { source, preview: found } });
    } catch (error) {
      setState({ ...idle, refusal: refusalOf(error) });
    }
  };

  const post = async (done: () => void): Promise<void> => {
    if (state.previewed === null) return;
    setState({ ...state, busy: "posting", refusal: null });
    try {
      const { source } = state.previewed;
      const posted = await client.measurements.post.mutate({ key: campaign, source });
      setState({ ...idle, posted });
      done();
      router.refresh();
    } catch (error) {
      setState({ ...state, busy: null, refusal: refusalOf(error) });
    }
  };

  return { ...state, preview, post, forget: () => setState(idle) };
}
