import { readFile } from "node:fs/promises";
import { basename } from "node:path";
import { fileURLToPath } from "node:url";
import type { Browser, Page } from "playwright-core";
import { expect } from "vitest";
import { serve } from "../../src/run/serve.js";

/** The viewer as `npm run build` leaves it. */
export const VIEWER = fileURLToPath(new URL("../../dist/viewer", import.meta.url));

const CHECK_DATA = fileURLToPath(new URL("../checks/data/", import.meta.url));

/** A file of the reference checks. */
export function checkData(name: string): string {
  return `${CHECK_DATA}${name}`;
}

/** A page of the viewer that keeps account of what it must not do. */
export interface Opened {
  readonly page: Page;
  /** Fails when the page broke its policy, threw, or asked for anything beyond its own origin. */
  expectWellBehaved(): void;
  close(): Promise<void>;
}

interface Wish {
  readonly resultFolder?: string;
  readonly address?: string;
  readonly width?: number;
  readonly height?: number;
  readonly scheme?: "light" | "dark";
}

/** Serves the viewer as `latchmap view` does, unless an address is given, and opens it. */
export async function openViewer(browser: Browser, wish: Wish = {}): Promise<Opened> {
  const { resultFolder, width = 1280, height = 800, scheme = "light" } = wish;
  const server =
    wish.address === undefined
      ? await serve({
          viewerFolder: VIEWER,
          ...(resultFolder === undefined ? {} : { resultFolder }),
          port: 0,
        })
      : undefined;
  const address = wish.address ?? server?.url ?? "";
  const page = await browser.newPage({ viewport: { width, height }, colorScheme: scheme });
  const wrongs: string[] = [];
  const beyond: string[] = [];
  page.on("pageerror", (error) => wrongs.push(error.message));
  page.on("console", (message) => {
    if (message.type() !== "error") return;
    // Without a result the page finds out by asking; the browser reports the honest 404.
    if (message.location().url.endsWith("/result/summary.json")) return;
    wrongs.push(message.text());
  });
  page.on("request", (request) => {
    const { protocol, origin } = new URL(request.url());
    if (!["blob:", "data:"].includes(protocol) && origin !== new URL(address).origin) {
      beyond.push(request.url());
    }
  });
  await page.goto(address);
  return {
    page,
    expectWellBehaved: () => {
      expect(wrongs).toEqual([]);
      expect(beyond).toEqual([]);
    },
    close: async () => {
      await page.close();
      await server?.close();
    },
  };
}

/** Drops a file on the page as a hand would. */
export async function dropFile(page: Page, name: string, bytes: Uint8Array): Promise<void> {
  const transfer = await page.evaluateHandle(
    ({ name, base64 }) => {
      const bytes = Uint8Array.from(atob(base64), (character) => character.charCodeAt(0));
      const carried = new DataTransfer();
      carried.items.add(new File([bytes], name));
      return carried;
    },
    { name, base64: Buffer.from(bytes).toString("base64") },
  );
  await page.dispatchEvent("#page", "drop", { dataTransfer: transfer });
}

/** Drops a file from disk. */
export async function dropFrom(page: Page, path: string): Promise<void> {
  await dropFile(page, basename(path), await readFile(path));
}

/** Waits until the sentence along the top says something and its field is painted; gives the whole of it. */
export async function sentenceSaying(page: Page, part: string): Promise<string> {
  const sentence = page.locator("h1.sentence", { hasText: part });
  await sentence.waitFor();
  await page.locator('.plot:not(.section)[aria-busy="false"]').waitFor();
  return ((await sentence.textContent()) ?? "").replaceAll(/\s+/g, " ");
}

/** Points at a cell of a field that is wholly shown and fills its plot, `width` × `height` cells; at a whole pixel, as a hand does. */
export async function pointAt(
  page: Page,
  cell: { readonly x: number; readonly y: number },
  field: { readonly width: number; readonly height: number },
): Promise<void> {
  const box = await page.locator(".plot").boundingBox();
  if (box === null) throw new Error("there is no plot");
  await page.mouse.move(
    Math.round(box.x + ((cell.x + 0.5) * box.width) / field.width),
    Math.round(box.y + ((cell.y + 0.5) * box.height) / field.height),
  );
}

/** What the read-out says of the cell under the cursor, by the names of its facts. */
export async function readOut(page: Page): Promise<Record<string, string>> {
  await page.locator('.readout[aria-busy="false"] dl').waitFor();
  return page
    .locator(".readout .fact")
    .evaluateAll((facts) =>
      Object.fromEntries(
        facts.map((fact) => [
          fact.querySelector("dt")?.textContent ?? "",
          fact.querySelector("dd")?.textContent ?? "",
        ]),
      ),
    );
}

/** Bits as the read-out prints them: `−1.552 bit` is −1.552. */
export function bitsIn(text: string | undefined): number {
  return Number((text ?? "").replace("−", "-").replace(" bit", ""));
}
