/** The objects of an NDJSON answer, one by one as they arrive. */
export async function* answerLines(
  stream: ReadableStream<Uint8Array>,
): AsyncGenerator<Record<string, unknown>> {
  const decoder = new TextDecoder("utf-8", { fatal: true });
  const reader = stream.getReader();
  let rest = "";
  try {
    for (;;) {
      const { done, value } = await reader.read();
      const lines = (
        rest + (done ? decoder.decode() : decoder.decode(value, { stream: true }))
      ).split("\n");
      rest = done ? "" : (lines.pop() ?? "");
      for (const line of lines) {
        if (line !== "") yield JSON.parse(line) as Record<string, unknown>;
      }
      if (done) return;
    }
  } finally {
    reader.releaseLock();
  }
}
