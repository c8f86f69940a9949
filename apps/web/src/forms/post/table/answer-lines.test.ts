import { expect, test } from "vitest";
import { answerLines } from "./answer-lines";

async function read(pieces: Uint8Array[]): Promise<unknown[]> {
  const stream = new ReadableStream<Uint8Array>({
    start(controller) {
      for (const piece of pieces) controller.enqueue(piece);
      controller.close();
    },
  });
  const found: unknown[] = [];
  for await (const line of answerLines(stream)) found.push(line);
  return found;
}

test("lines are read whole wherever the pieces were cut, within a character too", async () => {
  const bytes = new TextEncoder().encode('{"a":"µ"}\n\n{"b":2}\n{"c":3}');
  const whole = [{ a: "µ" }, { b: 2 }, { c: 3 }];
  for (let at = 0; at <= bytes.length; at += 1) {
    expect(await read([bytes.slice(0, at), bytes.slice(at)])).toEqual(whole);
  }
});

test("a line that was cut off is an error, not a line less", async () => {
  await expect(read([new TextEncoder().encode('{"a":1}\n{"b":')])).rejects.toThrow(SyntaxError);
});
