import { existsSync } from "node:fs";
import { delimiter, join } from "node:path";

const NAMES = [
  "chromium",
  "chromium-browser",
  "google-chrome",
  "google-chrome-stable",
  "chrome",
  "microsoft-edge",
];

const ELSEWHERE = [
  "/usr/bin/chromium",
  "/usr/bin/chromium-browser",
  "/snap/bin/chromium",
  "/opt/google/chrome/chrome",
  "/Applications/Google Chrome.app/Contents/MacOS/Google Chrome",
  "/Applications/Chromium.app/Contents/MacOS/Chromium",
  "C:\\Program Files\\Google\\Chrome\\Application\\chrome.exe",
];

/**
 * The path of a Chromium or Chrome on this machine: what CHROMIUM_PATH names, or else the first one
 * found. Undefined where there is none.
 * @returns {string | undefined}
 */
export function findChromium() {
  const named = process.env.CHROMIUM_PATH;
  if (named !== undefined && named !== "") return existsSync(named) ? named : undefined;
  const folders = (process.env.PATH ?? "").split(delimiter).filter((folder) => folder !== "");
  const candidates = folders.flatMap((folder) => NAMES.map((name) => join(folder, name)));
  return [...candidates, ...ELSEWHERE].find((path) => existsSync(path));
}
