import { performance } from "node:perf_hooks";
import type { Progress } from "./progress.js";

/** A progress that also keeps how long each stage took. */
export function timedProgress(inner: Progress): {
  readonly progress: Progress;
  /** Seconds a stage, to the millisecond; the running stage ends here. */
  seconds(): Record<string, number>;
} {
  const spent = new Map<string, number>();
  let current: { name: string; since: number } | undefined;
  const close = (): void => {
    if (current === undefined) return;
    const seconds = (performance.now() - current.since) / 1000;
    spent.set(current.name, (spent.get(current.name) ?? 0) + seconds);
    current = undefined;
  };
  return {
    progress: {
      stage: (name, total) => {
        close();
        current = { name, since: performance.now() };
        inner.stage(name, total);
      },
      advance: (done) => inner.advance(done),
      cancelled: () => inner.cancelled(),
    },
    seconds: () => {
      close();
      return Object.fromEntries(
        [...spent].map(([name, seconds]) => [name, Math.round(seconds * 1000) / 1000]),
      );
    },
  };
}
