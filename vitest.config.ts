import { defineConfig } from "vitest/config";

export default defineConfig({
  test: {
    include: ["tests/**/*.test.ts"],
    // Whole drawings, browsers and rasterisers are slow on a small machine.
    testTimeout: 60_000,
    hookTimeout: 60_000,
  },
});
