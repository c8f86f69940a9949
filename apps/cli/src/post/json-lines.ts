/** The values of an answer by lines of JSON, as they come. */
export async function* jsonLines(response: Response): AsyncGenerator<Record<string, unknown>> {
  const decoder = new TextDecoder();
  let rest = "";
  for await (const chunk of response.body ?? []) {
    rest += decoder.decode(chunk as Uint8Array, { stream: true });
    const lines = rest.split("\n");
    rest = lines.pop() ?? "";
    for (const line of lines) {
      if (line !== "") yield JSON.parse(line) as Record<string, unknown>;
    }
  }
  if (rest !== "") yield JSON.parse(rest) as Record<string, unknown>;
}
