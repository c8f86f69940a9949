import { randomBytes } from "node:crypto";
import { writeFile } from "node:fs/promises";
import { readSealRequest, sealFile } from "@weighhouse/campaign/sealed-file";
import { defineCommand } from "citty";
import { descriptions } from "../descriptions";
import { invalid, readTextFile } from "../document-file";
import { wrongUsage } from "../refusal";

export const seal = defineCommand({
  meta: { name: "seal", description: descriptions.seal },
  args: {
    file: {
      type: "positional",
      description: "What to seal, JSON: campaign, ledger, team, until, prediction or measurement",
      valueHint: "FILE",
      required: true,
    },
    output: {
      type: "string",
      alias: "o",
      description: "File to keep; FILE with .sealed.json for its ending unless given",
      valueHint: "SEALED.json",
    },
  },
  async run({ args }) {
    const read = readSealRequest(await readTextFile(args.file));
    if (!read.ok) throw invalid(read.problems);
    const sealed = sealFile(read.value, randomBytes(32).toString("hex"));
    const kept = args.output ?? `${args.file.replace(/\.json$/, "")}.sealed.json`;
    await writeNew(kept, `${JSON.stringify(sealed, null, 2)}\n`);
    const { hypothesis, measurand, until, digest } = sealed;
    const entry = { digest, ...(hypothesis === null ? {} : { hypothesis }), measurand, until };
    process.stdout.write(`${JSON.stringify(entry)}\n`);
    process.stderr.write(
      `Kept ${kept}. File the digest before ${measurand} is measured; open it with weighhouse reveal by ${until}. Without this file nobody can.\n`,
    );
  },
});

/** A sealed file that is written over is a seal that nobody opens. */
async function writeNew(path: string, text: string): Promise<void> {
  try {
    await writeFile(path, text, { flag: "wx", mode: 0o600 });
  } catch (error) {
    const why = (error as NodeJS.ErrnoException).code ?? String(error);
    const found = why === "EEXIST" ? `a file ${path} already` : `no way to write ${path} (${why})`;
    throw wrongUsage(`found ${found}; allowed the path of a file to make`);
  }
}
