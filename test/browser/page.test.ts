import type { Browser, Page } from "playwright-core";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { launchChromium } from "./chromium.js";
import { checkData, dropFrom, openViewer, sentenceSaying } from "./onpage.js";

let browser: Browser;

beforeAll(async () => {
  browser = await launchChromium();
});
afterAll(() => browser.close());

/**
 * The text on the page whose contrast with what is behind it is below 4.5 : 1 (WCAG 2.2, success
 * criterion 1.4.3; relative luminance as defined there).
 */
function faintText(page: Page): Promise<string[]> {
  return page.evaluate(() => {
    const paint = document.createElement("canvas").getContext("2d", { willReadFrequently: true });
    const rgba = (colour: string): number[] => {
      if (paint === null) return [];
      paint.clearRect(0, 0, 1, 1);
      paint.fillStyle = colour;
      paint.fillRect(0, 0, 1, 1);
      return [...paint.getImageData(0, 0, 1, 1).data];
    };
    const luminance = (colour: number[]): number => {
      const [red = 0, green = 0, blue = 0] = colour.map((byte) => {
        const part = byte / 255;
        return part <= 0.04045 ? part / 12.92 : ((part + 0.055) / 1.055) ** 2.4;
      });
      return 0.2126 * red + 0.7152 * green + 0.0722 * blue;
    };
    const behind = (element: Element | null): number[] => {
      if (element === null) return [255, 255, 255];
      const colour = rgba(getComputedStyle(element).backgroundColor);
      return colour[3] === 255 ? colour : behind(element.parentElement);
    };
    const faint: string[] = [];
    for (const element of document.querySelectorAll("#page *")) {
      const own = [...element.childNodes].some(
        (node) => node.nodeType === Node.TEXT_NODE && (node.textContent ?? "").trim() !== "",
      );
      if (!own || element.closest("title, .unseen") !== null) continue;
      const style = getComputedStyle(element);
      const text = luminance(rgba(element instanceof SVGElement ? style.fill : style.color));
      const ground = luminance(behind(element));
      const contrast = (Math.max(text, ground) + 0.05) / (Math.min(text, ground) + 0.05);
      if (contrast < 4.5) faint.push(`${element.textContent} (${contrast.toFixed(2)})`);
    }
    return faint;
  });
}

describe.each(["light", "dark"] as const)("in the %s scheme", (scheme) => {
  test("the text of the empty page, the field and a slip stands out from its ground", async () => {
    const viewer = await openViewer(browser, { scheme });
    const { page } = viewer;
    await page.getByRole("heading", { name: /own past/ }).waitFor();
    expect(await faintText(page)).toEqual([]);
    await dropFrom(page, checkData("rule110.npy"));
    await sentenceSaying(page, "rule110.npy");
    await page.locator(".field").focus();
    await page.keyboard.press("PageDown");
    await page.getByRole("button", { name: /on average/ }).click();
    await page.getByRole("dialog").waitFor();
    expect(await faintText(page)).toEqual([]);
    viewer.expectWellBehaved();
    await viewer.close();
  });
});

test("the scheme can be switched, and stays so", async () => {
  const viewer = await openViewer(browser);
  const { page } = viewer;
  await page.getByRole("button", { name: "dark sheet" }).click();
  expect(await faintText(page)).toEqual([]);
  const ink = await page.evaluate(() => getComputedStyle(document.documentElement).color);
  await page.reload();
  await page.getByRole("button", { name: "light sheet" }).waitFor();
  expect(await page.evaluate(() => getComputedStyle(document.documentElement).color)).toBe(ink);
  await viewer.close();
});

test.each([
  [360, 740],
  [3840, 2160],
])(
  "everything is on a page of %i × %i pixels, without scrolling sideways",
  async (width, height) => {
    const viewer = await openViewer(browser, { width, height });
    const { page } = viewer;
    await dropFrom(page, checkData("wind.csv"));
    await sentenceSaying(page, "wind.csv");
    for (const part of ["h1.sentence", ".plot", ".readout", ".legend"]) {
      const box = await page.locator(part).boundingBox();
      expect(box).not.toBeNull();
      if (box === null) continue;
      expect(box.x).toBeGreaterThanOrEqual(0);
      expect(box.x + box.width).toBeLessThanOrEqual(width);
      expect(box.y + box.height).toBeLessThanOrEqual(height);
      expect(box.height).toBeGreaterThan(15);
    }
    await viewer.close();
  },
);

test("every word of the sentence can be reached and used with the keyboard", async () => {
  const viewer = await openViewer(browser);
  const { page } = viewer;
  await dropFrom(page, checkData("rule110.npy"));
  await sentenceSaying(page, "rule110.npy");
  const reached: string[] = [];
  for (let presses = 0; presses < 30 && !reached.includes("field"); presses++) {
    await page.keyboard.press("Tab");
    reached.push(
      await page.evaluate(() => {
        const active = document.activeElement;
        return active?.classList.contains("field") ? "field" : (active?.textContent ?? "");
      }),
    );
  }
  expect(reached).toEqual(
    expect.arrayContaining([
      "Local storage",
      "rule110.npy",
      "history 12",
      "one model for all cells",
      "field",
    ]),
  );
  await page.getByRole("button", { name: "Local storage" }).focus();
  await page.keyboard.press("Enter");
  await page.keyboard.press("Tab");
  await page.keyboard.press("Enter");
  await sentenceSaying(page, "Values in rule110.npy");
  await page.getByRole("button", { name: /^history/ }).focus();
  await page.keyboard.press("Enter");
  await page.getByRole("dialog").waitFor();
  await page.keyboard.press("Escape");
  expect(await page.getByRole("dialog").count()).toBe(0);
  expect(await page.evaluate(() => document.activeElement?.textContent)).toBe("history 12");
  viewer.expectWellBehaved();
  await viewer.close();
});
