import { execFileSync, spawn } from "node:child_process";
import path from "node:path";
import { setTimeout as sleep } from "node:timers/promises";
import { beforeAll, expect, it } from "vitest";

const launch = path.resolve(import.meta.dirname, "..");
/** Runs for a minute unless it is stopped, and stops only as it is told. */
const part = `
  process.on("SIGTERM", () => process.exit(0));
  setTimeout(() => {}, 60_000);
  console.log(process.pid);
`;

beforeAll(() => {
  execFileSync(process.execPath, ["build.mjs"], { cwd: launch });
});

/** The launcher's stand-in, and the process id of the part that it runs. */
async function run(how: "alone" | "among others") {
  const script = path.join(launch, "src/testing/run-part.ts");
  const launcher = spawn(process.execPath, ["--import", "tsx", script, how, part], {
    stdio: ["ignore", "pipe", "inherit"],
  });
  const exited = new Promise<number | null>((resolve) => launcher.once("exit", resolve));
  const pid = await new Promise<number>((resolve) =>
    launcher.stdout.once("data", (said: Buffer) => resolve(Number(said.toString()))),
  );
  expect(isAlive(pid)).toBe(true);
  return { launcher, exited, pid };
}

function isAlive(pid: number): boolean {
  try {
    return process.kill(pid, 0);
  } catch {
    return false;
  }
}

async function expectGone(pid: number): Promise<void> {
  for (let waited = 0; waited < 5_000 && isAlive(pid); waited += 50) await sleep(50);
  const alive = isAlive(pid);
  if (alive) process.kill(pid, "SIGKILL");
  expect(alive).toBe(false);
}

it("a part does not outlive a launcher that was killed", async () => {
  const { launcher, pid } = await run("among others");
  launcher.kill("SIGKILL");
  await expectGone(pid);
});

it.each(["SIGINT", "SIGTERM", "SIGHUP"] as const)(
  "a part that runs alone ends with %s to its launcher, which ends well",
  async (signal) => {
    const { launcher, exited, pid } = await run("alone");
    launcher.kill(signal);
    expect(await exited).toBe(0);
    await expectGone(pid);
  },
);
