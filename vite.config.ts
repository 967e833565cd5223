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

/**
 * Zarr's compressors, 1.3 MB of them, are left out: Latchmap writes its arrays plainly. A map that was
 * compressed by something else is refused with these words.
 */
function leaveOutCompressors(): Plugin {
  const refuse =
    "export default { fromConfig() { throw new Error('it is compressed, which the viewer does not read'); } };";
  return {
    name: "leave-out-compressors",
    enforce: "pre",
    resolveId: (id) => (id.startsWith("numcodecs/") ? "\0no-compressor" : undefined),
    load: (id) => (id === "\0no-compressor" ? refuse : undefined),
  };
}

/**
 * Pixi's entry file reaches every renderer, so that all of them would land in one file. Taken from the
 * files where they stand, only the renderer that is chosen is fetched.
 */
function takePixiByParts(): Plugin {
  const lib = `${here}node_modules/pixi.js/lib/`;
  const parts = [
    `export { autoDetectRenderer } from "${lib}rendering/renderers/autoDetectRenderer.mjs";`,
    `export { CanvasSource } from "${lib}rendering/renderers/shared/texture/sources/CanvasSource.mjs";`,
    `export { Texture } from "${lib}rendering/renderers/shared/texture/Texture.mjs";`,
    `export { Container } from "${lib}scene/container/Container.mjs";`,
    `export { Sprite } from "${lib}scene/sprite/Sprite.mjs";`,
  ];
  return {
    name: "take-pixi-by-parts",
    apply: "build",
    enforce: "pre",
    resolveId: (id) => (id === "pixi.js" ? "\0pixi-parts" : undefined),
    load: (id) => (id === "\0pixi-parts" ? parts.join("\n") : undefined),
  };
}

export default defineConfig(() => ({
  root: process.env.VITEST === undefined ? `${here}viewer` : here,
  base: "./",
  appType: "mpa" as const,
  plugins: [dropPolicyWhileDeveloping(), takePixiByParts()],
  oxc: { jsx: { runtime: "automatic" as const, importSource: "preact" } },
  worker: { format: "es" as const, plugins: () => [leaveOutCompressors()] },
  // Known beforehand, so that the development server does not reload the page in the midst of work.
  optimizeDeps: { entries: ["index.html", "worker/worker.ts"] },
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
    exclude: ["test/bench/**", "test/slow/**", "node_modules/**"],
    testTimeout: 30_000,
    hookTimeout: 120_000,
  },
}));
