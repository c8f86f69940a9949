import { existsSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import path from "node:path";

/** Where the server that runs on this home answers; the demo's stream finds it by this file. */
const fileIn = (home: string) => path.join(home, "address");

export const writeAddress = (home: string, origin: string) => writeFileSync(fileIn(home), origin);
export const forgetAddress = (home: string) => rmSync(fileIn(home), { force: true });
export const readAddress = (home: string) =>
  existsSync(fileIn(home)) ? readFileSync(fileIn(home), "utf8").trim() : null;
