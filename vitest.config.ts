import { defineConfig } from "vitest/config";

export default defineConfig({
  test: {
    include: ["test/**/*.test.ts"],
    // Two cores: the slowest files bound the suite, so let them overlap.
    pool: "forks",
    maxWorkers: 2,
    testTimeout: 60_000,
  },
});
