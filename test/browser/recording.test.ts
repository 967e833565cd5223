import { readFile } from "node:fs/promises";
import type { Browser } from "playwright-core";
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, test } from "vitest";
import { colourIndex, storageColours } from "../../src/report/palette.js";
import cases from "../checks/cases.json" with { type: "json" };
import { launchChromium } from "./chromium.js";
import { npyFile } from "./npyfile.js";
import {
  bitsIn,
  checkData,
  dropFile,
  dropFrom,
  type Opened,
  openViewer,
  pointAt,
  readOut,
  sentenceSaying,
} from "./onpage.js";

let browser: Browser;
let viewer: Opened;

beforeAll(async () => {
  browser = await launchChromium();
});
afterAll(() => browser.close());
beforeEach(async () => {
  viewer = await openViewer(browser);
});
afterEach(async () => {
  viewer.expectWellBehaved();
  await viewer.close();
});

/** A case of the outside checks: its spots are [time, place, bits] by independent code. */
function outsideCase(id: string) {
  const found = cases.cases.find((each) => each.id === id);
  if (found === undefined || found.spots === undefined) throw new Error(`no spots in ${id}`);
  return found;
}

describe("a recording dropped on the page", () => {
  test("is mapped, and the cell under the pointer reads as independent code says", async () => {
    const { page } = viewer;
    const { spots = [], expect: averages } = outsideCase("rule54-k10-pooled");
    await dropFrom(page, checkData("rule54.npy"));
    await sentenceSaying(page, "rule54.npy");
    await page.getByRole("button", { name: /^history/ }).click();
    await page.getByLabel("earlier values").fill("10");
    await page.getByRole("button", { name: "Map again" }).click();
    const sentence = await sentenceSaying(page, "history 10");
    expect(sentence).toContain(`${averages?.storage_bits?.toFixed(2)} bit on average`);
    for (const [time = 0, place = 0, bits = 0] of spots) {
      await pointAt(page, { x: place, y: time }, { width: 400, height: 400 });
      const read = await readOut(page);
      expect([read.step, read.cell]).toEqual([String(time), String(place)]);
      expect(bitsIn(read["local storage"])).toBeCloseTo(bits, 3);
    }
  });

  test("shows each cell in the colour of its bits", async () => {
    const { page } = viewer;
    // Two cells in turn 0 and 1, out of step with each other: whatever the history, the past tells
    // the next value for certain and both values are equally frequent, so every cell has 1 bit.
    const values = Array.from({ length: 200 }, (_, i) => (i + (i >> 1)) % 2);
    await dropFile(page, "two.npy", npyFile([100, 2], values));
    await sentenceSaying(page, "1.00 bit on average");
    await pointAt(page, { x: 60, y: 1 }, { width: 100, height: 2 });
    expect(await readOut(page)).toMatchObject({
      step: "60",
      cell: "1",
      "local storage": "+1.000 bit",
    });
    const seen = await page.locator(".picture").evaluate((canvas) => {
      if (!(canvas instanceof HTMLCanvasElement)) return [];
      const context = canvas.getContext("2d");
      return [
        ...(context?.getImageData(canvas.width * 0.6, canvas.height * 0.75, 1, 1).data ?? []),
      ];
    });
    // All cells are equally strong, so the colours end at them.
    const place = colourIndex(1, 1, 255);
    expect(seen).toEqual([...storageColours("light", 255).subarray(4 * place, 4 * place + 4)]);
  });

  test("of more than a million cells is whole to its last step", async () => {
    const { page } = viewer;
    // 400 cells, each in turn 0 and 1, every other one out of step: 1 bit everywhere, as above.
    const [steps, cells] = [3000, 400];
    const values = Uint8Array.from(
      { length: steps * cells },
      (_, i) => ((i % cells) + Math.floor(i / cells)) % 2,
    );
    await dropFile(page, "long.npy", npyFile([steps, cells], values));
    await sentenceSaying(page, "400 cells × 3,000 steps");
    await page.locator(".field").focus();
    await page.keyboard.press("End");
    expect(await readOut(page)).toMatchObject({
      step: "2999",
      value: "1",
      "local storage": "+1.000 bit",
    });
    await page.keyboard.press("ArrowRight");
    expect(await readOut(page)).toMatchObject({ value: "0", "local storage": "+1.000 bit" });
  });

  test("is read cell by cell with the keyboard alone", async () => {
    const { page } = viewer;
    await dropFrom(page, checkData("rule110.npy"));
    await sentenceSaying(page, "rule110.npy");
    await page.locator(".field").focus();
    await page.keyboard.press("Home");
    for (const key of ["ArrowRight", "ArrowRight", "Shift+ArrowDown", "ArrowDown", "ArrowUp"]) {
      await page.keyboard.press(key);
    }
    expect(await readOut(page)).toMatchObject({ step: "10", cell: "2" });
    await expect
      .poll(() => page.locator(".readout [aria-live]").textContent())
      .toContain("step 10, cell 2, value");
    await page.keyboard.press("+");
    await page.keyboard.press("End");
    expect(await readOut(page)).toMatchObject({ step: "399", cell: "2" });
    await page.keyboard.press("0");
    expect(await page.locator(".field.enlarged").count()).toBe(0);
  });

  test("is zoomed with the wheel about the pointer, and panned by dragging", async () => {
    const { page } = viewer;
    await dropFrom(page, checkData("rule110.npy"));
    await sentenceSaying(page, "rule110.npy");
    await pointAt(page, { x: 250, y: 120 }, { width: 400, height: 400 });
    const cell = { step: "120", cell: "250" };
    for (let turn = 0; turn < 6; turn++) await page.mouse.wheel(0, -200);
    await page.locator(".field.enlarged").waitFor();
    // A nudge of one pixel, since the pointer itself has not moved.
    const box = await page.locator(".plot").boundingBox();
    if (box === null) throw new Error("there is no plot");
    const at = {
      x: Math.round(box.x + (250.5 * box.width) / 400),
      y: Math.round(box.y + (120.5 * box.height) / 400),
    };
    await page.mouse.move(at.x + 1, at.y);
    expect(await readOut(page)).toMatchObject(cell);
    await page.mouse.down();
    await page.mouse.move(at.x - 200, at.y + 90, { steps: 4 });
    await page.mouse.up();
    await page.mouse.move(at.x - 201, at.y + 90);
    expect(await readOut(page)).toMatchObject(cell);
  });

  test("is zoomed with two fingers", async () => {
    const { page } = viewer;
    await dropFrom(page, checkData("rule110.npy"));
    await sentenceSaying(page, "rule110.npy");
    const hand = await page.context().newCDPSession(page);
    const touch = (type: "touchStart" | "touchMove" | "touchEnd", apart: number) =>
      hand.send("Input.dispatchTouchEvent", {
        type,
        touchPoints:
          type === "touchEnd"
            ? []
            : [
                { x: 600 - apart, y: 400, id: 0 },
                { x: 600 + apart, y: 400, id: 1 },
              ],
      });
    await touch("touchStart", 40);
    for (const apart of [60, 90, 140]) await touch("touchMove", apart);
    await touch("touchEnd", 0);
    await page.locator(".field.enlarged").waitFor();
  });

  test("says why its first steps have no storage", async () => {
    const { page } = viewer;
    await dropFrom(page, checkData("rule110.npy"));
    await sentenceSaying(page, "history 12");
    await pointAt(page, { x: 100, y: 3 }, { width: 400, height: 400 });
    expect(await readOut(page)).toMatchObject({ "local storage": "none" });
    expect(await page.locator(".readout-meaning").textContent()).toBe(
      "the first 12 steps have no whole past",
    );
  });

  test("as a table shows its nodes by name and its time as dates", async () => {
    const { page } = viewer;
    await dropFrom(page, checkData("wind.csv"));
    const sentence = await sentenceSaying(page, "wind.csv");
    expect(sentence).toContain("12 nodes in the file’s order × 6,574 steps running right");
    // The value is the file's own: row 1961-01-01, column RPT.
    const table = (await readFile(checkData("wind.csv"), "utf8")).split("\n");
    const [, first] = (table[1] ?? "").split(",");
    await page.locator(".field").focus();
    await page.keyboard.press("Home");
    expect(await readOut(page)).toMatchObject({
      date: "1961-01-01",
      node: "RPT",
      value: String(Number(first)),
    });
  });
});

describe("a file that is no recording", () => {
  test("is refused with what to do, and the page takes the next one", async () => {
    const { page } = viewer;
    const whole = await readFile(checkData("rule110.npy"));
    await dropFile(page, "cut.npy", whole.subarray(0, 5000));
    const said = page.getByRole("alert");
    await said.waitFor();
    expect(await said.textContent()).toMatch(
      /cut\.npy could not be mapped[\s\S]*\w+\.[\s\S]*\w+\./,
    );
    await dropFile(page, "whole.npy", whole);
    await sentenceSaying(page, "whole.npy");
    expect(await said.count()).toBe(0);
  });

  test("leaves the field that was there, and the way back to it", async () => {
    const { page } = viewer;
    await dropFrom(page, checkData("rule110.npy"));
    await sentenceSaying(page, "rule110.npy");
    await dropFile(page, "empty.csv", new Uint8Array());
    await page.getByRole("alert").waitFor();
    await page.getByRole("button", { name: "Back to the field" }).click();
    await pointAt(page, { x: 7, y: 20 }, { width: 400, height: 400 });
    expect(await readOut(page)).toMatchObject({ step: "20", cell: "7" });
  });

  test("because of a word in it is read at once when the word is named", async () => {
    const { page } = viewer;
    const rows = Array.from(
      { length: 60 },
      (_, i) => `${i % 2},${i === 30 ? "lost" : (i >> 1) % 2}`,
    );
    const bytes = new TextEncoder().encode(`north,south\n${rows.join("\n")}\n`);
    await dropFile(page, "words.csv", bytes);
    expect(await page.getByRole("alert").textContent()).toContain('"lost" is not a number');
    await page.getByRole("button", { name: "Read it so" }).click();
    await sentenceSaying(page, "2 nodes in the file’s order × 60 steps");
  });
});

test("cancelling stops the work and leaves the page ready for another file", async () => {
  const { page } = viewer;
  await page.evaluate(
    (header) => {
      const carried = new DataTransfer();
      const cells = new Uint8Array(10_000 * 6_000);
      for (let i = 0; i < cells.length; i++) cells[i] = (i * i) % 7 === 1 ? 1 : 0;
      carried.items.add(new File([Uint8Array.from(header), cells], "long.npy"));
      document.dispatchEvent(new DragEvent("drop", { dataTransfer: carried, cancelable: true }));
    },
    [...npyFile([10_000, 6_000], [])],
  );
  await page.getByRole("progressbar").waitFor();
  await page.getByRole("button", { name: "Cancel" }).click();
  await page.getByRole("heading", { name: /own past/ }).waitFor();
  await expect.poll(() => page.workers().length).toBe(0);
  await dropFrom(page, checkData("rule110.npy"));
  await sentenceSaying(page, "rule110.npy");
});
