import { expect, test } from "vitest";
import { outcomeCounts, sizeWords } from "./check-protocol";

test.each([
  [999, "999 bytes"],
  [1000, "1.0 kB"],
  [12_345_678, "12.3 MB"],
  [2_000_000_000, "2.0 GB"],
])("%d bytes are said as %s", (bytes, words) => expect(sizeWords(bytes)).toBe(words));

test("a report's line counts leave out what there is none of", () => {
  const line = (outcome: "ok" | "failed" | "not present") => ({
    check: "payloads" as const,
    outcome,
    detail: "",
  });
  expect(outcomeCounts({ ok: true, lines: [line("ok"), line("ok")] })).toBe("2 ok");
  expect(
    outcomeCounts({ ok: false, lines: [line("ok"), line("failed"), line("not present")] }),
  ).toBe("1 ok, 1 failed, 1 not present");
});
