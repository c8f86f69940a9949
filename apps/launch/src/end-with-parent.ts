/**
 * Loaded before web and scorer (`node --import`): ends them when the launcher is gone, however it
 * ended. The launcher holds the other end of this process's input, which a SIGKILL closes too.
 */
import { isMainThread } from "node:worker_threads";
import { PARENT } from "./parent";

const endWithinMs = 8_000;

// What such a program starts itself inherits the flag, not the pipe.
if (isMainThread && process.env[PARENT] === String(process.ppid)) {
  process.stdin.once("close", () => {
    process.kill(process.pid, "SIGTERM");
    setTimeout(() => process.kill(process.pid, "SIGKILL"), endWithinMs).unref();
  });
  process.stdin.on("error", () => {});
  process.stdin.resume();
  process.stdin.unref();
}
