import { fileURLToPath } from "node:url";
import type { Plugin } from "vite";
import { defineConfig } from "vitest/config";

const here = fileURLToPath(new URL(".", import.meta.url));

/**
 * The page's content policy stands in its own head and holds wherever the page is served from. The
 * development server alone injects style elements, which that policy rightly refuses.
 */
function dropPolicyWhileDeveloping(): Plugin {
  return {
    name: "drop-policy-while-developing",
    apply: "serve",
    transformIndexHtml: (html) =>
      html.replace(/<meta\s+http-equiv="Content-Security-Policy"[^>]*>/, ""),
  };
}

export default defineConfig(() => ({
  root: process.env.VITEST === undefined ? `${here}viewer` : here,
  base: "./",
  appType: "mpa" as const,
  plugins: [dropPolicyWhileDeveloping()],
  oxc: { jsx: { runtime: "automatic" as const, importSource: "preact" } },
  worker: { format: "es" as const },
  build: {
    outDir: `${here}dist/viewer`,
    emptyOutDir: true,
    target: "es2022",
    // Inlined assets would be data: addresses, which the content policy refuses.
    assetsInlineLimit: 0,
    modulePreload: { polyfill: false },
  },
  test: {
    include: ["test/**/*.test.ts"],
    exclude: ["test/bench/**", "node_modules/**"],
    testTimeout: 30_000,
    hookTimeout: 120_000,
  },
}));
