/** Bundles the scorer: our own sources in, every dependency left in node_modules. */
import { build } from "esbuild";

await build({
  entryPoints: { scorer: "src/scorer.ts" },
  outdir: "dist",
  outExtension: { ".js": ".mjs" },
  bundle: true,
  platform: "node",
  target: "node20",
  format: "esm",
  sourcemap: true,
  logLevel: "warning",
  plugins: [
    {
      name: "dependencies-stay-outside",
      setup(pluginBuild) {
        pluginBuild.onResolve({ filter: /^[^./]/ }, ({ path, kind }) =>
          kind === "entry-point" || path.startsWith("@weighhouse/")
            ? null
            : { path, external: true },
        );
      },
    },
  ],
});
