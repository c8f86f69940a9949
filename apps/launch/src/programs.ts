import { spawn } from "node:child_process";
import path from "node:path";
import { fileURLToPath, pathToFileURL } from "node:url";
import { PARENT } from "./parent";

/** The checkout's root, seen from apps/launch/dist. */
const root = path.resolve(path.dirname(fileURLToPath(import.meta.url)), "../../..");

export type Program = { name: string; args: string[] };
export type Running = { name: string; exited: Promise<number>; stop(): Promise<void> };

const stopWithinMs = 8_000;
const endWithParent = path.join(root, "apps/launch/dist/end-with-parent.mjs");

export function webProgram({ port, host }: { port: number; host: string }): Program {
  const next = path.join(root, "node_modules/next/dist/bin/next");
  const web = path.join(root, "apps/web");
  return { name: "web", args: [next, "start", web, "--port", String(port), "--hostname", host] };
}

export function scorerProgram(): Program {
  return { name: "scorer", args: [path.join(root, "apps/scorer/dist/scorer.mjs")] };
}

/**
 * Starts a part as a process of its own group, so that Ctrl-C reaches the launcher alone and the
 * parts are stopped in order: web and scorer before the database. A part ends with this process.
 */
export function startProgram(program: Program, environment: NodeJS.ProcessEnv): Running {
  const args = ["--import", pathToFileURL(endWithParent).href, ...program.args];
  const child = spawn(process.execPath, args, {
    cwd: root,
    env: {
      ...environment,
      NODE_ENV: "production",
      NEXT_TELEMETRY_DISABLED: "1",
      [PARENT]: String(process.pid),
    },
    stdio: ["pipe", "inherit", "inherit"],
    detached: true,
  });
  child.stdin.on("error", () => {});
  const exited = new Promise<number>((resolve) => {
    child.on("error", () => resolve(127));
    child.on("exit", (code, signal) => resolve(code ?? (signal === "SIGTERM" ? 0 : 1)));
  });
  const stop = async () => {
    child.kill("SIGTERM");
    const late = setTimeout(() => child.kill("SIGKILL"), stopWithinMs);
    await exited;
    clearTimeout(late);
  };
  return { name: program.name, exited, stop };
}

/** Runs one part alone, until it ends or this process is told to. */
export function runAlone(program: Program): Promise<number> {
  const { exited, stop } = startProgram(program, process.env);
  for (const signal of ["SIGINT", "SIGTERM", "SIGHUP"] as const) {
    process.once(signal, () => void stop());
  }
  return exited;
}
