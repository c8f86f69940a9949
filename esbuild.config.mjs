import { existsSync } from "node:fs";
import path from "node:path";
import { build } from "esbuild";

/**
 * Bundles a program of apps/: our own TypeScript in, dependencies left in node_modules. One that npm
 * has put beside a package of ours instead of at the top goes into the bundle, since the program
 * could not find it there.
 */
export function bundleProgram(entryPoints) {
  return build({
    entryPoints,
    outdir: "dist",
    outExtension: { ".js": ".mjs" },
    bundle: true,
    platform: "node",
    target: "node20",
    format: "esm",
    sourcemap: true,
    logLevel: "warning",
    plugins: [{ name: "dependencies-stay-outside", setup: leaveDependenciesOutside }],
  });
}

function leaveDependenciesOutside(bundle) {
  bundle.onResolve({ filter: /^[^./]/ }, ({ path: name, kind }) =>
    kind !== "entry-point" && !name.startsWith("@weighhouse/") && isAtTop(name)
      ? { path: name, external: true }
      : null,
  );
}

function isAtTop(name) {
  if (name.startsWith("node:")) return true;
  const depth = name.startsWith("@") ? 2 : 1;
  const dependency = name.split("/").slice(0, depth).join("/");
  return existsSync(path.join(import.meta.dirname, "node_modules", dependency));
}
