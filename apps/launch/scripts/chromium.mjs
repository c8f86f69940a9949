/** Finds a Chromium for the browser tests, or installs one: apt-get as root on Debian, else Playwright's. */
import { existsSync } from "node:fs";
import { bin, has, run, say } from "./steps.mjs";

const places = [
  process.env.WEIGHHOUSE_CHROMIUM,
  "/usr/bin/chromium",
  "/usr/bin/chromium-browser",
  "/usr/bin/google-chrome",
];

/** Path of a browser, "playwright" for the one that Playwright keeps, or null. */
export async function findChromium() {
  const found = places.find((place) => place && existsSync(place));
  if (found) return found;
  const { chromium } = await import("@playwright/test");
  return existsSync(chromium.executablePath()) ? "playwright" : null;
}

export async function installChromium() {
  if (process.getuid?.() === 0 && has("apt-get")) {
    say("installing Debian's chromium (apt-get)");
    const env = { DEBIAN_FRONTEND: "noninteractive" };
    await run("apt-get", ["update", "-qq"], { env });
    const code = await run(
      "apt-get",
      ["install", "-y", "-qq", "--no-install-recommends", "chromium"],
      { env },
    );
    if (code === 0) return findChromium();
  }
  say("installing Playwright's Chromium");
  const code = await run(bin("playwright"), ["install", "chromium"]);
  return code === 0 ? findChromium() : null;
}
