import { stat } from "node:fs/promises";
import { join, resolve } from "node:path";
import { fileURLToPath } from "node:url";
import type { Command } from "commander";
import { latchmapError } from "../recording/errors.js";
import { serve } from "../run/serve.js";
import { RUN_RECORD } from "../run/wholefolder.js";
import { whole } from "./options.js";
import { remark, say } from "./terminal.js";

const VIEWER_FOLDER = fileURLToPath(new URL("../viewer", import.meta.url));

/** `latchmap view`: the viewer, on this machine only. */
export function addViewCommand(program: Command): void {
  program
    .command("view")
    .summary("look at a result in the browser, on this machine only")
    .description(
      "Serves the viewer on 127.0.0.1; nothing leaves this machine. The first line printed is the address to open. Without a folder, drop a recording onto the page.",
    )
    .argument("[result]", "a result folder")
    .option("--port <n>", "the port; any free one when left out", whole, 0)
    .addHelpText(
      "after",
      `
Examples:
  latchmap view automaton-map
  latchmap view --port 8100`,
    )
    .action(async (folder: string | undefined, options: { port: number }) => {
      if (folder !== undefined) await requireResult(folder);
      await requireViewer();
      const { url, close } = await serve({
        viewerFolder: VIEWER_FOLDER,
        ...(folder === undefined ? {} : { resultFolder: resolve(folder) }),
        port: options.port,
      });
      say(url);
      remark(`Serving ${folder ?? "the empty viewer"} until you press Ctrl+C.`);
      await new Promise<void>((done) => {
        process.once("SIGINT", () => done());
        process.once("SIGTERM", () => done());
      });
      await close();
    });
}

async function requireResult(folder: string): Promise<void> {
  const found = await isFile(join(folder, RUN_RECORD));
  if (found) return;
  throw latchmapError(
    "not-a-result",
    `this is no result folder: it holds no ${RUN_RECORD}`,
    "Make one with: latchmap map RECORDING --out FOLDER",
    { file: folder },
  );
}

async function requireViewer(): Promise<void> {
  if (await isFile(join(VIEWER_FOLDER, "index.html"))) return;
  throw latchmapError("missing-file", "the viewer was not built", "Run: npm run build");
}

async function isFile(path: string): Promise<boolean> {
  return stat(path).then(
    (stats) => stats.isFile(),
    () => false,
  );
}
