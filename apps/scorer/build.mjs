import { bundleProgram } from "../../esbuild.config.mjs";

await bundleProgram({ scorer: "src/scorer.ts" });
