import { stripVTControlCharacters } from "node:util";
import { ENGINE_VERSION } from "@weighhouse/engine/version";
import { renderUsage, runCommand, type ArgDef, type CommandDef } from "citty";
import { descriptions } from "./descriptions";
import { Refusal, wrongUsage, type ExitCode } from "./refusal";
import { hasColour } from "./terminal";

/** Each command loads only when it runs: `--help` needs no engine. */
type Commands = Record<keyof typeof descriptions, () => Promise<CommandDef>>;

const about = {
  name: "weighhouse",
  version: ENGINE_VERSION,
  description: "Scores physical hypotheses against measurements, and checks audit trails",
};

const whole: CommandDef = {
  meta: about,
  subCommands: Object.fromEntries(
    Object.entries(descriptions).map(([name, description]) => [
      name,
      { meta: { name, description } },
    ]),
  ),
};

/** Runs a command line and gives its exit code; errors go to stderr, one a line. */
export async function run(args: string[], commands: Commands): Promise<ExitCode> {
  process.stdout.on("error", endQuietlyOnClosedPipe);
  try {
    return await dispatch(args, commands);
  } catch (error) {
    if (error instanceof Refusal) {
      for (const line of error.lines) process.stderr.write(`${line}\n`);
      return error.exitCode;
    }
    if (isCittyError(error)) {
      process.stderr.write(`${stripVTControlCharacters(error.message)}\n`);
      return 2;
    }
    throw error;
  }
}

async function dispatch(args: string[], commands: Commands): Promise<ExitCode> {
  const [name, ...rest] = args;
  if (name === undefined) {
    process.stderr.write(`${await usageOf(whole)}\n`);
    return 2;
  }
  if (name === "--help" || name === "-h") {
    process.stdout.write(`${await usageOf(whole)}\n`);
    return 0;
  }
  if (name === "--version" || name === "-v") {
    process.stdout.write(`${about.version}\n`);
    return 0;
  }
  if (!isCommand(name)) {
    const available = Object.keys(descriptions).join(", ");
    throw wrongUsage(`found the command ${name}; allowed ${available}`);
  }
  const command = await commands[name]();
  if (rest.includes("--help") || rest.includes("-h")) {
    process.stdout.write(`${await usageOf(command, { meta: about })}\n`);
    return 0;
  }
  refuseUnknownArguments(rest, command.args as Record<string, ArgDef>);
  const { result } = await runCommand(command, { rawArgs: rest });
  return (result as ExitCode | undefined) ?? 0;
}

function isCommand(name: string): name is keyof typeof descriptions {
  return Object.hasOwn(descriptions, name);
}

async function usageOf(command: CommandDef, parent?: CommandDef): Promise<string> {
  const usage = await renderUsage(command, parent);
  return hasColour(process.stdout) ? usage : stripVTControlCharacters(usage);
}

/** citty passes over what it doesn't know; a mistyped flag must not be. */
function refuseUnknownArguments(args: string[], defined: Record<string, ArgDef>): void {
  const flags = new Map<string, ArgDef>();
  for (const [name, definition] of Object.entries(defined)) {
    if (definition.type === "positional") continue;
    flags.set(`--${name}`, definition);
    for (const alias of [(definition as { alias?: string | string[] }).alias ?? []].flat()) {
      flags.set(`-${alias}`, definition);
    }
  }
  const positionals = Object.values(defined).filter(({ type }) => type === "positional").length;
  let given = 0;
  for (let index = 0; index < args.length; index++) {
    const arg = args[index] ?? "";
    if (!arg.startsWith("-") || arg === "-") {
      given++;
      if (given > positionals)
        throw wrongUsage(`found a further argument ${arg}; allowed ${positionals}`);
      continue;
    }
    const [flag = "", value] = arg.split(/=(.*)/s);
    const definition = flags.get(flag);
    if (definition === undefined) {
      throw wrongUsage(`found ${flag}; allowed ${[...flags.keys()].join(", ") || "no flag"}`);
    }
    if (definition.type === "boolean") {
      if (value !== undefined) throw wrongUsage(`found ${arg}; allowed ${flag} without a value`);
    } else if (value === undefined && args[++index] === undefined) {
      throw wrongUsage(
        `found ${flag} without a value; allowed ${flag} ${definition.valueHint ?? "VALUE"}`,
      );
    }
  }
}

function isCittyError(error: unknown): error is Error {
  return error instanceof Error && error.name === "CLIError";
}

/** A reader such as `head` that closes the pipe has all that it wanted. */
function endQuietlyOnClosedPipe(error: NodeJS.ErrnoException): void {
  if (error.code !== "EPIPE") throw error;
  process.exit();
}
