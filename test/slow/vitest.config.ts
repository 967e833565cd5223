import { fileURLToPath } from "node:url";
import { defineConfig } from "vitest/config";

/** Simulations of minutes: `npm run test:slow`. The quick tests leave them out. */
export default defineConfig({
  root: fileURLToPath(new URL("../..", import.meta.url)),
  test: {
    include: ["test/slow/**/*.slow.test.ts"],
    testTimeout: 3_600_000,
    reporters: ["verbose"],
  },
});
