/**
 * Run before the tests: the viewer is tested in a real browser. Where there is none, Debian's own is
 * installed if that is possible here; otherwise this says what to install and ends the run, because
 * tests that are skipped in silence pass for ever.
 */
import { spawnSync } from "node:child_process";
import { existsSync } from "node:fs";
import { findChromium } from "./findchromium.mjs";

const found = findChromium();
if (found !== undefined) {
  process.stdout.write(`browser for the tests: ${found}\n`);
} else if (process.env.CHROMIUM_PATH) {
  giveUp(`CHROMIUM_PATH names ${process.env.CHROMIUM_PATH}, which is not there.`);
} else if (process.getuid?.() === 0 && existsSync("/usr/bin/apt-get")) {
  install();
} else {
  giveUp("No Chromium or Chrome was found.");
}

function install() {
  process.stdout.write("no browser for the tests; installing the package chromium with apt-get\n");
  const options = { encoding: "utf8", env: { ...process.env, DEBIAN_FRONTEND: "noninteractive" } };
  for (const step of [["update"], ["install", "-y", "--no-install-recommends", "chromium"]]) {
    const done = spawnSync("apt-get", step, options);
    if (done.status === 0) continue;
    const end = `${done.stdout ?? ""}${done.stderr ?? ""}`.trim().split("\n").slice(-8).join("\n");
    process.stderr.write(`${end}\n`);
    giveUp(`apt-get ${step.join(" ")} did not succeed.`);
  }
  const installed = findChromium();
  if (installed === undefined)
    giveUp("The package chromium was installed, but brought no browser.");
  process.stdout.write(`browser for the tests: ${installed}\n`);
}

function giveUp(reason) {
  process.stderr.write(
    `${reason}\nThe viewer's tests need Chromium or Chrome. Install one (Debian, Ubuntu: apt-get install chromium),\nor set CHROMIUM_PATH to the program file of one, and run the tests again.\n`,
  );
  process.exit(1);
}
