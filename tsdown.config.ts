// How dist/ is built: the command, the Node library, the browser library.
import { defineConfig } from "tsdown";

export default defineConfig({
  entry: {
    "cli/main": "src/cli/main.ts",
    "node/index": "src/node/index.ts",
    "node/worker": "src/node/worker.ts",
    index: "src/index.ts",
  },
  format: "esm",
  platform: "node",
  target: "node20",
  dts: { tsconfig: "tsconfig.json" },
  clean: true,
  sourcemap: false,
});
