import { randomBytes } from "node:crypto";
import { existsSync, readFileSync, writeFileSync } from "node:fs";
import path from "node:path";

/** The demo's accounts are named for what they do: no people. */
export const demoPeople = [
  {
    email: "coordinator@demo.example",
    name: "Demo coordinator",
    what: "coordinator",
    role: "coordinator",
    team: null,
  },
  {
    email: "deep-heat@demo.example",
    name: "Deep Heat's theorist",
    what: "team Deep Heat",
    role: "member",
    team: "deep-heat",
  },
  {
    email: "sliders@demo.example",
    name: "Sliders' theorist",
    what: "team Sliders",
    role: "member",
    team: "sliders",
  },
  {
    email: "brine-group@demo.example",
    name: "Brine Group's theorist",
    what: "team Brine Group",
    role: "member",
    team: "brine-group",
  },
  {
    email: "relict-water@demo.example",
    name: "Relict Water's theorist",
    what: "team Relict Water",
    role: "member",
    team: "relict-water",
  },
  {
    email: "observer@demo.example",
    name: "Demo observer",
    what: "observer, in no team",
    role: "member",
    team: null,
  },
] as const;

const fileIn = (home: string) => path.join(home, "demo-password");

/** The demo's password is made on the first start and kept where only this user can read it. */
export function demoPassword(home: string): string {
  const file = fileIn(home);
  if (!existsSync(file)) writeFileSync(file, randomBytes(9).toString("base64url"), { mode: 0o600 });
  return readFileSync(file, "utf8").trim();
}

const madeFile = (home: string) => path.join(home, "demo-made");

export const isDemoMade = (home: string) => existsSync(madeFile(home));
export const markDemoMade = (home: string) => writeFileSync(madeFile(home), "");

/** Who can sign in, where this home has a demo. */
export function readDemoAccounts(home: string) {
  return existsSync(fileIn(home)) ? { password: demoPassword(home), people: demoPeople } : null;
}
