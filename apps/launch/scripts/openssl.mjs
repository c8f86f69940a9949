/** The tests' time-stamp authority is openssl's; most machines have it. */
import { spawnSync } from "node:child_process";
import { existsSync } from "node:fs";

/** Gets openssl where there is none and this is root on Debian; 3 where it can't be had. */
export function findOpenssl() {
  if (answers()) return 0;
  if (process.getuid?.() === 0 && existsSync("/usr/bin/apt-get")) {
    const env = { ...process.env, DEBIAN_FRONTEND: "noninteractive" };
    spawnSync("apt-get", ["update", "-qq"], { stdio: "inherit", env });
    const words = ["install", "-qq", "-y", "--no-install-recommends", "openssl"];
    spawnSync("apt-get", words, { stdio: "inherit", env });
  }
  return answers() ? 0 : 3;
}

function answers() {
  return spawnSync("openssl", ["version"]).status === 0;
}
