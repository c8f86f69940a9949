"use client";

import type { CampaignDocument } from "@weighhouse/campaign/document";
import { useRouter } from "next/navigation";
import { useCallback, useEffect, useRef, useState } from "react";
import { useTRPCClient } from "@/trpc/client";
import type { Refusal } from "../../refusal";
import type {
  MatchedTable,
  OpenedTable,
  PostedTable,
  PreviewedTable,
  Progress,
  Remembered,
  TableSettings,
} from "./protocol";
import { CallFailed, TableWorker } from "./table-worker";

export type Busy = "reading" | "matching" | "previewing" | "posting";

interface State {
  busy: Busy | null;
  progress: Progress | null;
  opened: OpenedTable | null;
  remembered: Remembered[];
  matched: MatchedTable | null;
  previewed: PreviewedTable | null;
  posted: PostedTable | null;
  refusal: Refusal | null;
  /** Goes up whenever the rows have changed: lists of them are asked for again. */
  version: number;
}

const closed: State = {
  busy: null,
  progress: null,
  opened: null,
  remembered: [],
  matched: null,
  previewed: null,
  posted: null,
  refusal: null,
  version: 0,
};

/** A table in its worker: read, matched, previewed, posted. The page holds what it shows alone. */
export function useTable(document: CampaignDocument) {
  const campaign = document.campaign.key;
  const client = useTRPCClient();
  const router = useRouter();
  const [state, setState] = useState<State>(closed);
  const worker = useRef<TableWorker | null>(null);
  /** Answers to an earlier turn come too late to be shown. */
  const turn = useRef(0);
  /** The same for every try to post what was previewed once, as long as no answer came. */
  const attempt = useRef("");
  /** A next table is matched by what the last one's posting has kept. */
  const remembering = useRef(Promise.resolve());
  useEffect(() => () => worker.current?.close(), []);

  const change = useCallback(
    (changed: Partial<State>) => setState((before) => ({ ...before, ...changed })),
    [],
  );

  /** Runs one step; one that was overtaken by another says nothing more. */
  const step = useCallback(
    async (busy: Busy, run: (worker: TableWorker) => Promise<Partial<State>>) => {
      const mine = (turn.current += 1);
      change({ busy, progress: null, refusal: null });
      try {
        const changed = await run(worker.current!);
        if (mine !== turn.current) return false;
        setState((before) => ({
          ...before,
          busy: null,
          progress: null,
          version: before.version + 1,
          ...changed,
        }));
        return true;
      } catch (error) {
        if (!(error instanceof CallFailed)) throw error;
        if (error.why === "refused") attempt.current = crypto.randomUUID();
        if (mine === turn.current && error.why !== "stopped")
          change({ busy: null, progress: null, refusal: error.refusal });
        return false;
      }
    },
    [change],
  );

  const open = useCallback(
    async (file: Blob, name: string) => {
      worker.current?.close();
      worker.current = new TableWorker((progress) => change({ progress }));
      setState((before) => ({ ...closed, version: before.version + 1 }));
      const { observables, measurands } = document;
      await step("reading", async (there) => {
        const opened = await there.call("open", {
          file,
          name,
          document: { observables, measurands },
        });
        const columns = opened.columns.map(({ name: column, unit }) => ({ name: column, unit }));
        await remembering.current;
        // Without what is remembered the table can be matched all the same.
        const remembered =
          columns.length === 0
            ? []
            : await client.measurements.matches.mutate({ key: campaign, columns }).catch(() => []);
        return { opened, remembered };
      });
    },
    [campaign, change, client, document, step],
  );

  const match = useCallback(
    async (settings: TableSettings) => {
      await worker.current?.call("stop", null);
      await step("matching", async (there) => ({
        matched: await there.call("match", settings),
        previewed: null,
      }));
    },
    [step],
  );

  const preview = (leaveOut: boolean) =>
    step("previewing", async (there) => {
      const previewed = await there.call("preview", { campaign, leaveOut });
      attempt.current = crypto.randomUUID();
      return { previewed };
    });

  const post = async (done: () => void) => {
    const { opened, matched } = state;
    const entered = await step("posting", async (there) => ({
      posted: await there.call("post", { campaign, attempt: attempt.current }),
    }));
    if (!entered) return;
    remembering.current = remember(opened, matched);
    worker.current?.close();
    setState((before) => ({ ...closed, posted: before.posted, version: before.version + 1 }));
    done();
    router.refresh();
  };

  /** Kept for the facility's next table; where it can't be kept, it is chosen again then. */
  const remember = async (opened: OpenedTable | null, matched: MatchedTable | null) => {
    if (opened === null || matched === null || matched.facility === null) return;
    const columns = opened.columns.map(({ name, unit }) => ({ name, unit }));
    if (columns.length === 0) return;
    const { facility, choices } = matched;
    await client.measurements.rememberMatch
      .mutate({ key: campaign, facility, columns, choices })
      .catch(() => null);
  };

  const forgetRemembered = async (facility: string) => {
    const columns = (state.opened?.columns ?? []).map(({ name, unit }) => ({ name, unit }));
    await client.measurements.forgetMatch.mutate({ key: campaign, facility, columns });
    change({ remembered: state.remembered.filter((each) => each.facility !== facility) });
  };

  /** Ends what is under way: reading closes the table, a preview can be asked for again. */
  const stop = async () => {
    turn.current += 1;
    if (state.busy === "reading" || state.busy === "matching") {
      worker.current?.close();
      setState((before) => ({ ...closed, version: before.version + 1 }));
      return true;
    }
    await worker.current?.call("stop", null);
    const refusal = state.busy === "posting" ? stoppedPosting : null;
    setState((before) => ({
      ...before,
      busy: null,
      progress: null,
      refusal,
      version: before.version + 1,
    }));
    return false;
  };

  const close = () => {
    turn.current += 1;
    worker.current?.close();
    setState((before) => ({ ...closed, version: before.version + 1 }));
  };

  return { ...state, worker, open, match, preview, post, forgetRemembered, stop, close };
}

const stoppedPosting: Refusal = {
  message:
    "You stopped waiting for the server: the rows may be on record or not. Your table is kept. Post it again: what is there already is not entered twice.",
  problems: [],
  signedOut: false,
};
