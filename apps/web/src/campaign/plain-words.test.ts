import { observableSchema } from "@weighhouse/campaign/declarations";
import { predictionSchema } from "@weighhouse/campaign/hypothesis";
import { expect, test } from "vitest";
import { predictionInWords, referenceInWords } from "./plain-words";

const height = observableSchema.parse({ key: "h", title: "Height", unit: "m", scale: "linear" });
const flux = observableSchema.parse({ key: "f", title: "Flux", unit: "kg/s", scale: "log10" });
const words = (prediction: object, of = height) =>
  predictionInWords(predictionSchema.parse({ measurand: "m", ...prediction }), of).replaceAll(
    "\u00a0",
    " ",
  );

test("a prediction says its expected value, its theory error and the unit", () => {
  expect(words({ expected: 1.75 })).toBe("exactly 1.75 m");
  expect(words({ expected: 12, tolerance: { family: "normal", sd: 3 } })).toBe("12 ± 3 m (sd)");
  expect(words({ expected: 12, tolerance: { family: "normal", sd: 0.1 } }, flux)).toBe(
    "12 kg/s ± 0.1 dex (sd)",
  );
  expect(words({ tolerance: { family: "interval", lower: -4, upper: -2 } })).toBe("−4 to −2 m");
  expect(words({ tolerance: { family: "atMost", bound: 30 } })).toBe("at most 30 m");
});

test("a no-model range says its family in words", () => {
  const reference = { family: "uniform" as const, lower: -1, upper: 4, scatter: 0 };
  expect(referenceInWords(reference, height)).toBe("−1 to 4\u00a0m, all alike");
  expect(referenceInWords({ ...reference, lower: 1 }, flux)).toBe(
    "1 to 4\u00a0kg/s, all alike in log₁₀",
  );
});
