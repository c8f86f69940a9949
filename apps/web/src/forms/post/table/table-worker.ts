import type { Refusal } from "../../refusal";
import type { Call, Calls, FromWorker, Progress } from "./protocol";

/** Why a call failed: the server refused it, its answer was lost, or it was ended from here. */
type Why = "refused" | "lost" | "stopped";

export class CallFailed extends Error {
  constructor(
    readonly refusal: Refusal,
    readonly why: Why,
  ) {
    super(refusal.message);
  }
}

interface Waiting {
  resolve: (gives: never) => void;
  reject: (error: CallFailed) => void;
}

/** The worker that holds a table, called like functions. */
export class TableWorker {
  private readonly worker: Worker;
  private readonly waiting = new Map<number, Waiting>();
  private number = 0;

  constructor(onProgress: (progress: Progress) => void) {
    this.worker = new Worker(new URL("./read-table.worker.ts", import.meta.url), {
      type: "module",
    });
    this.worker.addEventListener("message", ({ data }: MessageEvent<FromWorker>) => {
      if ("progress" in data) onProgress(data.progress);
      else this.settle(data);
    });
    this.worker.addEventListener("error", (event) =>
      this.end(failed(event.message || "The table could not be read here.")),
    );
  }

  call<C extends Call>(call: C, input: Calls[C]["takes"]): Promise<Calls[C]["gives"]> {
    this.number += 1;
    const { number } = this;
    return new Promise<Calls[C]["gives"]>((resolve, reject) => {
      this.waiting.set(number, { resolve: resolve as Waiting["resolve"], reject });
      // oxlint-disable-next-line unicorn/require-post-message-target-origin -- a worker has one listener, the rule takes it for a window
      this.worker.postMessage({ number, call, input });
    });
  }

  /** Ends it whatever it is doing, and all that waits for it. */
  close(): void {
    this.end(new CallFailed({ message: "Stopped.", problems: [], signedOut: false }, "stopped"));
  }

  private settle(data: Exclude<FromWorker, { progress: Progress }>): void {
    const waiting = this.waiting.get(data.number);
    this.waiting.delete(data.number);
    if ("gives" in data) waiting?.resolve(data.gives as never);
    else if ("refusal" in data)
      waiting?.reject(new CallFailed(data.refusal, data.answered ? "refused" : "lost"));
    else waiting?.reject(failed(data.failure));
  }

  private end(error: CallFailed): void {
    this.worker.terminate();
    for (const { reject } of this.waiting.values()) reject(error);
    this.waiting.clear();
  }
}

function failed(message: string): CallFailed {
  return new CallFailed({ message, problems: [], signedOut: false }, "lost");
}
