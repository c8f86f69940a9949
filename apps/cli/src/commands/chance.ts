import { chanceOf, type Chance } from "@weighhouse/engine/chance";
import { formatNumber } from "@weighhouse/figures/numbers";
import { formatP } from "@weighhouse/figures/standing-numbers";
import { defineCommand } from "citty";
import { descriptions } from "../descriptions";
import { wrongUsage } from "../refusal";
import { terminalOf, wrap } from "../terminal";

export const chance = defineCommand({
  meta: { name: "chance", description: descriptions.chance },
  args: {
    p: {
      type: "positional",
      description: "Probability of the coincidence by chance, above 0 and below 1",
      required: true,
    },
    looks: {
      type: "string",
      description: "In how many places it could have been noticed (default 1)",
      valueHint: "N",
    },
    json: { type: "boolean", description: "Write the numbers as JSON" },
  },
  run({ args }) {
    const p = Number(args.p);
    if (!(p > 0 && p < 1)) {
      throw wrongUsage(`found ${args.p}; allowed a probability above 0 and below 1`);
    }
    const looks = Number(args.looks ?? 1);
    if (!(Number.isSafeInteger(looks) && looks >= 1)) {
      throw wrongUsage(`found --looks ${args.looks}; allowed a whole number of 1 or more`);
    }
    const found = chanceOf(p, looks);
    process.stdout.write(args.json ? `${JSON.stringify(found, null, 2)}\n` : reportText(found));
  },
});

function reportText(found: Chance): string {
  const { proseColumns } = terminalOf(process.stdout);
  const { p, looks, sidak, bonferroni, bayesFactorBound, bayesFactorBoundAfterLooks } = found;
  const bound = (value: number | null) =>
    value === null ? "none: p is 1/e or more" : `at most ${formatNumber(value, 4)}`;
  const rows = [
    ["p", formatP(p)],
    ["looks", String(looks)],
    ["p after the looks, independent (Šidák)", formatP(sidak)],
    ["p after the looks, at most (Bonferroni)", formatP(bonferroni)],
    ["Bayes factor against chance", bound(bayesFactorBound)],
    ["Bayes factor against chance, after the looks", bound(bayesFactorBoundAfterLooks)],
  ] as const;
  const widest = Math.max(...rows.map(([name]) => name.length));
  const table = rows.map(([name, value]) => `${name.padEnd(widest)}  ${value}\n`).join("");
  const caution = wrap(
    "The bounds are those of Sellke, Bayarri & Berger (2001): no prior on the alternative does better. They are no evidence, and enter no standings.",
    proseColumns,
  );
  return `${table}${caution}\n`;
}
