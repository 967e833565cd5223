import { mkdtemp, rm, writeFile } from "node:fs/promises";
import { request } from "node:http";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { serve } from "../../src/run/serve.js";

let folder = "";
let server: Awaited<ReturnType<typeof serve>>;

beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), "latchmap-serve-"));
  await writeFile(join(folder, "index.html"), "<p>the page</p>");
  await writeFile(join(folder, "worker-1.js"), "0");
  await writeFile(join(folder, "digits.bin"), "0123456789");
  await writeFile(`${folder}.secret`, "secret");
  server = await serve({ viewerFolder: folder, resultFolder: folder, port: 0 });
});

afterAll(async () => {
  await server.close();
  await rm(folder, { recursive: true });
  await rm(`${folder}.secret`);
});

const get = (path: string, headers: Record<string, string> = {}): Promise<Response> =>
  fetch(new URL(path, server.url), { headers });

describe("the server of the viewer", () => {
  it("listens on this machine only", () => {
    expect(new URL(server.url).hostname).toBe("127.0.0.1");
  });

  it("gives the page with a policy that lets nothing leave", async () => {
    const response = await get("/");
    expect(await response.text()).toBe("<p>the page</p>");
    expect(response.headers.get("content-security-policy")).toMatch(
      /default-src 'self'; script-src 'self';/,
    );
  });

  it("allows functions from text inside the worker alone", async () => {
    const page = await get("/");
    const worker = await get("/worker-1.js");
    expect(page.headers.get("content-security-policy")).not.toMatch(/unsafe-eval/);
    expect(worker.headers.get("content-security-policy")).toMatch(/'wasm-unsafe-eval'/);
  });

  for (const [range, status, text, where] of [
    ["bytes=2-4", 206, "234", "bytes 2-4/10"],
    ["bytes=7-", 206, "789", "bytes 7-9/10"],
    ["bytes=-3", 206, "789", "bytes 7-9/10"],
    ["bytes=8-99", 206, "89", "bytes 8-9/10"],
    ["bytes=20-30", 416, "", "bytes */10"],
  ] as const) {
    it(`answers the range ${range}`, async () => {
      const response = await get("/result/digits.bin", { range });
      expect(response.status).toBe(status);
      expect(await response.text()).toBe(text);
      expect(response.headers.get("content-range")).toBe(where);
    });
  }

  it("never leaves the folders that it serves", async () => {
    // fetch would tidy the dots away, so the path is sent as it is.
    const { port } = new URL(server.url);
    const name = folder.split("/").at(-1);
    for (const path of [`/../${name}.secret`, `/result/..%2f${name}.secret`, "/result/%00"]) {
      const status = await new Promise((resolve, reject) => {
        request({ host: "127.0.0.1", port, path }, (response) => {
          response.resume();
          resolve(response.statusCode);
        })
          .on("error", reject)
          .end();
      });
      expect(status).toBe(404);
    }
  });

  it("refuses to write", async () => {
    const response = await fetch(server.url, { method: "PUT", body: "x" });
    expect(response.status).toBe(405);
  });

  it("says which port is in use", async () => {
    const port = Number(new URL(server.url).port);
    await expect(serve({ viewerFolder: folder, port })).rejects.toThrow(
      `--port: port ${port} is in use`,
    );
  });
});
