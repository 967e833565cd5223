import type { Progress } from "../run/progress.js";

const WIDTH = 30;
const REDRAW_MS = 80;

/**
 * Progress as one line on standard error that redraws itself; nothing when that is not a terminal.
 * The first interrupt asks the run to end cleanly; a second one ends the process at once.
 */
export function terminalProgress(): { readonly progress: Progress; clear(): void } {
  const shown = process.stderr.isTTY === true;
  let stage = "";
  let total = 0;
  let drawn = 0;
  let interrupted = false;
  const interrupt = (): void => {
    if (interrupted) process.exit(130);
    interrupted = true;
  };
  process.on("SIGINT", interrupt);
  process.on("SIGTERM", interrupt);
  const draw = (done: number): void => {
    const now = Date.now();
    if (!shown || (now - drawn < REDRAW_MS && done < total)) return;
    drawn = now;
    const share = total === 0 ? 1 : done / total;
    const filled = Math.round(share * WIDTH);
    const bar = "━".repeat(filled) + "╌".repeat(WIDTH - filled);
    const percent = `${Math.floor(share * 100)}%`.padStart(4);
    process.stderr.write(`\r\x1b[2K${stage.padEnd(9)} ${bar} ${percent}`);
  };
  return {
    progress: {
      stage: (name, size) => {
        stage = name;
        total = size;
        draw(0);
      },
      advance: draw,
      cancelled: () => interrupted,
    },
    clear: () => {
      if (shown && drawn > 0) process.stderr.write("\r\x1b[2K");
      process.off("SIGINT", interrupt);
      process.off("SIGTERM", interrupt);
    },
  };
}
