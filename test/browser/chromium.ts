import { type Browser, chromium } from "playwright-core";
import { findChromium } from "./findchromium.mjs";

const QUIET = [
  "--no-sandbox",
  "--disable-gpu",
  "--disable-quic",
  "--disable-background-networking",
  "--disable-component-update",
  "--disable-sync",
];

/** Starts the machine's own Chromium without a window; the tests close it. */
export async function launchChromium(): Promise<Browser> {
  const executablePath = findChromium();
  if (executablePath === undefined) {
    throw new Error("no browser was found; run: node test/browser/ensure-chromium.mjs");
  }
  return chromium.launch({ executablePath, args: QUIET });
}
