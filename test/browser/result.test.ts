import { createReadStream } from "node:fs";
import { mkdtemp, rm, stat, truncate } from "node:fs/promises";
import { createServer } from "node:http";
import { tmpdir } from "node:os";
import { extname, join } from "node:path";
import type { Browser } from "playwright-core";
import { afterAll, afterEach, beforeAll, beforeEach, expect, test } from "vitest";
import { recordingInMemory } from "../../src/recording/memory.js";
import type { Recording } from "../../src/recording/recording.js";
import { mapRecording } from "../../src/run/map.js";
import { silentProgress } from "../../src/run/progress.js";
import { mapIntoFolder } from "../../src/run/resultfolder.js";
import { launchChromium } from "./chromium.js";
import {
  checkData,
  dropFrom,
  openViewer,
  pointAt,
  readOut,
  sentenceSaying,
  VIEWER,
} from "./onpage.js";

let browser: Browser;
let folder = "";

beforeAll(async () => {
  browser = await launchChromium();
});
afterAll(() => browser.close());
beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), "latchmap-viewer-"));
});
afterEach(() => rm(folder, { recursive: true, force: true }));

async function result(recording: Recording, history: number): Promise<string> {
  const out = join(folder, "result");
  const target = { out, force: false, notes: [], asked: {} };
  await mapIntoFolder(
    recording,
    (sink, progress) => mapRecording(recording, { history }, sink, progress),
    target,
    silentProgress,
  );
  return out;
}

/** Node a in turn 0 and 1; node b always 0, with a gap at step 4. Nine days. */
function twoNodes(): Recording {
  const values = Float64Array.from({ length: 18 }, (_, i) => (i % 2 === 0 ? (i / 2) % 2 : 0));
  values[9] = Number.NaN;
  return recordingInMemory({
    values,
    layout: { kind: "network", nodes: 2 },
    names: ["a", "b"],
    time: {
      kind: "dates",
      name: "day",
      values: Float64Array.from({ length: 9 }, (_, i) => Date.UTC(2024, 1, 26 + i)),
    },
    origin: { format: "csv", file: "two.csv" },
  });
}

test("a result that is served opens by itself and reads as worked out by hand", async () => {
  const viewer = await openViewer(browser, { resultFolder: await result(twoNodes(), 1) });
  const { page } = viewer;
  const sentence = await sentenceSaying(page, "two.csv");
  expect(sentence).toContain("2 nodes in the file’s order × 9 steps running right, history 1");
  const field = { width: 9, height: 2 };
  // Of a's eight windows, four end in 1, always after 0: log2(1 / (4/8)) = 1 bit.
  await pointAt(page, { x: 3, y: 0 }, field);
  expect(await readOut(page)).toEqual({
    day: "2024-02-29",
    node: "a",
    value: "1",
    "local storage": "+1.000 bit",
  });
  // What never changes tells nothing.
  await pointAt(page, { x: 7, y: 1 }, field);
  expect(await readOut(page)).toMatchObject({ node: "b", "local storage": "0.000 bit" });
  await pointAt(page, { x: 4, y: 1 }, field);
  expect(await readOut(page)).toMatchObject({ value: "a gap", "local storage": "none" });
  await pointAt(page, { x: 5, y: 1 }, field);
  expect(await readOut(page)).toMatchObject({ value: "0", "local storage": "none" });
  expect(await page.locator(".readout-meaning").textContent()).toBe("its past touches a gap");
  viewer.expectWellBehaved();
  await viewer.close();
});

test("a grid shows one frame, and its time is changed with the keyboard", async () => {
  // Cell (row r, column c) of step t holds 10 t + 3 r + c, so a read-out names its own cell.
  const values = Uint8Array.from({ length: 6 * 6 }, (_, i) => 10 * Math.floor(i / 6) + (i % 6));
  const grid = recordingInMemory({
    values,
    layout: { kind: "grid", rows: 2, columns: 3, wrap: true },
    origin: { format: "npy", file: "grid.npy" },
  });
  const viewer = await openViewer(browser, { resultFolder: await result(grid, 1) });
  const { page } = viewer;
  await sentenceSaying(page, "2 × 3 cells × 6 steps");
  await page.locator(".field").focus();
  await page.keyboard.press("Home");
  await page.keyboard.press("ArrowRight");
  await page.keyboard.press("ArrowDown");
  await page.keyboard.press("PageDown");
  await page.keyboard.press("PageDown");
  expect(await readOut(page)).toMatchObject({ step: "2", "row, column": "1,1", value: "24" });
  await page.getByRole("slider", { name: "step" }).focus();
  await page.keyboard.press("ArrowRight");
  expect(await readOut(page)).toMatchObject({ step: "3", "row, column": "1,1", value: "34" });
  await page.getByRole("button", { name: "Play" }).click();
  await expect.poll(async () => (await readOut(page)).step).not.toBe("3");
  await page.getByRole("button", { name: "Pause" }).click();
  viewer.expectWellBehaved();
  await viewer.close();
});

test("a result that was cut short is refused with what to do, and the page stays usable", async () => {
  const resultFolder = await result(twoNodes(), 1);
  await truncate(join(resultFolder, "map.zarr", "local_storage", "c", "0", "0"), 10);
  const viewer = await openViewer(browser, { resultFolder });
  const { page } = viewer;
  const said = page.getByRole("alert");
  await said.waitFor();
  expect(await said.textContent()).toContain("10 bytes instead of");
  await dropFrom(page, checkData("rule110.npy"));
  await sentenceSaying(page, "rule110.npy");
  viewer.expectWellBehaved();
  await viewer.close();
});

test("the viewer runs from any folder of a plain static host", async () => {
  const types: Record<string, string> = {
    ".html": "text/html",
    ".js": "text/javascript",
    ".css": "text/css",
  };
  const host = createServer(async (request, response) => {
    const name = new URL(request.url ?? "/", "http://localhost").pathname.replace(
      "/some/folder/",
      "",
    );
    const path = join(VIEWER, name === "" ? "index.html" : name);
    const found = await stat(path).catch(() => undefined);
    if (found === undefined) {
      response.writeHead(404).end();
      return;
    }
    response.writeHead(200, { "content-type": types[extname(path)] ?? "application/octet-stream" });
    createReadStream(path).pipe(response);
  });
  await new Promise<void>((listening) => host.listen(0, "127.0.0.1", listening));
  const address = host.address();
  const port = typeof address === "object" && address !== null ? address.port : 0;
  const viewer = await openViewer(browser, { address: `http://127.0.0.1:${port}/some/folder/` });
  await dropFrom(viewer.page, checkData("rule110.npy"));
  await sentenceSaying(viewer.page, "rule110.npy");
  viewer.expectWellBehaved();
  await viewer.close();
  host.closeAllConnections();
  host.close();
});
