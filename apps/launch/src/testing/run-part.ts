/** Stands for the launcher in tests: runs a program given as text, as a part alone or among others. */
import { runAlone, startProgram } from "../programs";

const [, , how, text = ""] = process.argv;
const program = { name: "part", args: ["--input-type=module", "--eval", text] };
process.exit(
  await (how === "alone" ? runAlone(program) : startProgram(program, process.env).exited),
);
