// Test and benchmark settings; a reporter that closes with one plain line of counts.
import { defineConfig } from "vitest/config";
import type { Reporter } from "vitest/node";

const counts: Reporter = {
  onTestRunEnd(modules) {
    let passed = 0;
    let failed = 0;
    for (const module of modules) {
      // A file that does not even load counts as one failure.
      if (module.errors().length > 0) failed++;
      for (const test of module.children.allTests()) {
        const { state } = test.result();
        if (state === "passed") passed++;
        else if (state === "failed") failed++;
      }
    }
    process.stdout.write(`\n${passed} passed, ${failed} failed\n`);
  },
};

export default defineConfig({
  test: {
    include: ["test/**/*.test.ts"],
    benchmark: { include: ["test/bench/**/*.bench.ts"] },
    testTimeout: 120_000,
    hookTimeout: 120_000,
    maxWorkers: 2,
    reporters: ["default", counts],
  },
});
