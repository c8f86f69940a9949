/**
 * Passes an answer by lines on and tells its last line once it has ended, before the client sees the
 * end. A client that goes stops nothing: the work goes on, and what comes of it is told.
 */
export function watchLastLine(
  body: ReadableStream<Uint8Array>,
  told: { ended(line: string): Promise<void>; broken(): Promise<void> },
): ReadableStream<Uint8Array> {
  const reader = body.getReader();
  const decoder = new TextDecoder();
  let [line, begun] = ["", ""];
  const note = (chunk: Uint8Array) => {
    const lines = (begun + decoder.decode(chunk, { stream: true })).split("\n");
    begun = lines.pop()!;
    line = lines.findLast((one) => one.trim() !== "") ?? line;
  };
  const next = async () => {
    try {
      const { done, value } = await reader.read();
      if (value !== undefined) note(value);
      if (done) await told.ended(`${begun.trim() === "" ? line : begun}\n`);
      return value;
    } catch (error) {
      await told.broken();
      throw error;
    }
  };
  return new ReadableStream<Uint8Array>({
    async pull(controller) {
      const value = await next();
      if (value === undefined) controller.close();
      else controller.enqueue(value);
    },
    async cancel() {
      try {
        while ((await next()) !== undefined);
      } catch {
        // Nobody is left to be told of it; the claim is given up.
      }
    },
  });
}
