import type { Log } from "@weighhouse/store/open-store";
import { problemDetails } from "../problem-details";

/** Writes one line of an answer; waits for a client that reads slowly. */
export type WriteLine = (value: unknown) => Promise<void>;

/**
 * An answer by lines of JSON, made while it is read. What is refused before the first line is
 * refused as ever, with its own status; after it the last line says it.
 *
 * @param run writes the lines; what it throws becomes a line `{ problem }`
 */
export async function linesAnswer(
  log: Log,
  run: (write: WriteLine) => Promise<void>,
): Promise<Response> {
  const { readable, writable } = new TransformStream<Uint8Array, Uint8Array>(
    undefined,
    undefined,
    // So much waits for a client that reads slowly before the work waits for it too.
    new ByteLengthQueuingStrategy({ highWaterMark: 1_048_576 }),
  );
  const writer = writable.getWriter();
  const encoder = new TextEncoder();
  let begin: () => void = () => {};
  const begun = new Promise<void>((resolve) => (begin = resolve));
  let isBegun = false;
  let isGone = false;
  const write: WriteLine = async (value) => {
    isBegun = true;
    begin();
    if (isGone) return;
    try {
      await writer.ready;
      await writer.write(encoder.encode(`${JSON.stringify(value)}\n`));
    } catch {
      // The client has gone. What was asked for is done all the same, as it would be unseen.
      isGone = true;
    }
  };
  const ended = run(write)
    .catch(async (error: unknown) => {
      if (!isBegun) throw error;
      await write({ problem: problemDetails(error, log) });
    })
    .then(() => writer.close().catch(() => {}));
  await Promise.race([begun, ended]);
  ended.catch(() => {});
  return new Response(readable, {
    headers: { "content-type": "application/x-ndjson", "cache-control": "no-store" },
  });
}

/** Progress lines, a few a second whatever is told. */
export function someOf<T>(write: WriteLine, name: string): (told: T) => void {
  let last = -Infinity;
  return (told) => {
    const now = performance.now();
    if (now - last < EVERY_MS) return;
    last = now;
    void write({ [name]: told });
  };
}

const EVERY_MS = 250;
