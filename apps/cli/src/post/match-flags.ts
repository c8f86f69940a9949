import { wrongUsage } from "../refusal";

/**
 * The fields that were chosen for columns, by column name: each `--match COLUMN=FIELD`. A column's
 * name may hold an equals sign, a field's holds none.
 */
export function matchFlags(args: readonly string[]): Record<string, string> {
  const texts = args.flatMap((arg, index) => {
    if (arg === "--match") return [args[index + 1] ?? ""];
    return arg.startsWith("--match=") ? [arg.slice("--match=".length)] : [];
  });
  return Object.fromEntries(
    texts.map((text) => {
      const at = text.lastIndexOf("=");
      if (at > 0 && at < text.length - 1) return [text.slice(0, at), text.slice(at + 1)];
      throw wrongUsage(`found --match ${text}; allowed --match COLUMN=FIELD`);
    }),
  );
}
