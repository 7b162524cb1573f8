// Test and benchmark settings.
import { defineConfig } from "vitest/config";

export default defineConfig({
  test: {
    include: ["test/**/*.test.ts"],
    benchmark: { include: ["test/bench/**/*.bench.ts"] },
    testTimeout: 120_000,
    maxWorkers: 2,
  },
});
