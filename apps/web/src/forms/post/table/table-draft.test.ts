import { expect, test } from "vitest";
import { noChoices } from "./choices";
import { choicesOf, defaultsOf, emptyTable, tableSchema } from "./table-draft";

test("a table of which nothing is said for all rows has no defaults and no choices", async () => {
  const whole = await tableSchema.parseAsync(emptyTable);
  const none = { measurand: null, facility: null, batch: null, status: "final" };
  expect(defaultsOf(whole)).toEqual(none);
  expect(choicesOf(noChoices, whole)).toEqual(noChoices);
});

test("what is said for all rows goes beside what was chosen for columns", async () => {
  const draft = { ...emptyTable, facility: "pier", limitsAt: "sigmas" as const, limitsNumber: "3" };
  const whole = await tableSchema.parseAsync({ ...draft, decimal: "comma" });
  expect(defaultsOf(whole)).toMatchObject({ facility: "pier" });
  const columns = { ...noChoices, columns: { peak: "value" } };
  expect(choicesOf(columns, whole)).toMatchObject({
    columns: { peak: "value" },
    decimal: "comma",
    limits: { sigmas: 3 },
  });
});

test("a confidence that is none, or not given, is refused at its field", async () => {
  for (const limitsNumber of ["95", ""]) {
    const read = await tableSchema.safeParseAsync({
      ...emptyTable,
      limitsAt: "confidence",
      limitsNumber,
    });
    expect(read.error?.issues.map(({ path }) => path.join("."))).toEqual(["limitsNumber"]);
  }
});
