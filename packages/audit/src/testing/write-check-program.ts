import { readFileSync, writeFileSync } from "node:fs";

/** Writes check.py into the module that archives take it from: a bundle has no files beside it. */
const source = readFileSync(new URL("../check.py", import.meta.url), "utf8");
writeFileSync(new URL("../check-program.ts", import.meta.url), moduleText(source));

function moduleText(program: string): string {
  if (/`|\$\{/.test(program)) throw new Error("check.py holds a backtick or a ${");
  return `/** check.py, written here by \`npm run check-program\`; a test holds the two together. */
export const checkProgram = String.raw\`${program}\`;
`;
}
