import { spawn } from "node:child_process";
import { fileURLToPath } from "node:url";

export const bin = fileURLToPath(new URL("../../bin/weighhouse.mjs", import.meta.url));
export const eclipse = fileURLToPath(
  new URL("../../../../test/reference/campaigns/eclipse-1919.json", import.meta.url),
);

export type Ran = { code: number | null; out: string; err: string };

/** Runs the command as its users do: the committed program, in a process of its own. */
export function weighhouse(
  args: string[],
  options: { input?: string; env?: Record<string, string>; cwd?: string } = {},
): Promise<Ran> {
  const { COLUMNS: _, ...inherited } = process.env;
  const child = spawn(process.execPath, [bin, ...args], {
    cwd: options.cwd,
    env: { ...inherited, ...options.env },
  });
  let [out, err] = ["", ""];
  child.stdout.setEncoding("utf8").on("data", (text: string) => (out += text));
  child.stderr.setEncoding("utf8").on("data", (text: string) => (err += text));
  child.stdin.on("error", () => undefined).end(options.input ?? "");
  return new Promise((resolve, reject) => {
    child.on("error", reject).on("close", (code) => resolve({ code, out, err }));
  });
}
