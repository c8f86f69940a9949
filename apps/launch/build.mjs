import { bundleProgram } from "../../esbuild.config.mjs";

await bundleProgram({
  launch: "src/launch.ts",
  "demo-stream": "src/demo-stream.ts",
  "end-with-parent": "src/end-with-parent.ts",
});
