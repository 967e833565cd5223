import { createReadStream } from "node:fs";
import { stat } from "node:fs/promises";
import { createServer, type IncomingMessage, type Server, type ServerResponse } from "node:http";
import { extname, join, normalize, sep } from "node:path";
import { latchmapError } from "../recording/errors.js";
import { systemCode } from "./files.js";

/** What the page and, in its own response, the worker may do. Nothing leaves this origin. */
const PAGE_POLICY =
  "default-src 'self'; script-src 'self'; worker-src 'self'; img-src 'self' blob: data:; object-src 'none'; base-uri 'none'; frame-ancestors 'none'";
const WORKER_POLICY = "default-src 'self'; script-src 'self' 'unsafe-eval' 'wasm-unsafe-eval'";

const TYPES: Readonly<Record<string, string>> = {
  ".html": "text/html; charset=utf-8",
  ".js": "text/javascript; charset=utf-8",
  ".css": "text/css; charset=utf-8",
  ".json": "application/json",
  ".csv": "text/csv; charset=utf-8",
  ".svg": "image/svg+xml",
  ".png": "image/png",
  ".woff2": "font/woff2",
};

/** What is served: the viewer's files at `/`, a result folder at `/result/`. */
export interface Serving {
  readonly viewerFolder: string;
  readonly resultFolder?: string;
  /** 0 takes any free port. */
  readonly port: number;
}

/**
 * Serves the viewer on this machine only (127.0.0.1), with Range requests.
 * @throws {LatchmapError} `bad-call` when the port is taken or not allowed
 */
export async function serve(
  serving: Serving,
): Promise<{ readonly url: string; close(): Promise<void> }> {
  const server = createServer((request, response) => {
    answer(serving, request, response).catch(() => response.destroy());
  });
  const port = await listen(server, serving.port);
  return {
    url: `http://127.0.0.1:${port}/`,
    close: () =>
      new Promise((resolve) => {
        server.close(() => resolve());
        server.closeAllConnections();
      }),
  };
}

function listen(server: Server, port: number): Promise<number> {
  return new Promise((resolve, reject) => {
    server.once("error", (cause) => {
      const taken = systemCode(cause) === "EADDRINUSE";
      reject(
        latchmapError(
          "bad-call",
          taken ? `port ${port} is in use` : `port ${port} cannot be opened`,
          "Choose another, or leave --port out for any free one",
          { option: "--port" },
        ),
      );
    });
    server.listen(port, "127.0.0.1", () => {
      const address = server.address();
      resolve(typeof address === "object" && address !== null ? address.port : port);
    });
  });
}

async function answer(
  serving: Serving,
  request: IncomingMessage,
  response: ServerResponse,
): Promise<void> {
  if (request.method !== "GET" && request.method !== "HEAD") {
    response.writeHead(405, { allow: "GET, HEAD" }).end();
    return;
  }
  const path = filePath(serving, request.url ?? "/");
  const stats = path === undefined ? undefined : await stat(path).catch(() => undefined);
  if (path === undefined || stats === undefined || !stats.isFile()) {
    response.writeHead(404, { "content-type": "text/plain; charset=utf-8" }).end("not here\n");
    return;
  }
  const range = byteRange(request.headers.range, stats.size);
  if (range === "unsatisfiable") {
    response.writeHead(416, { "content-range": `bytes */${stats.size}` }).end();
    return;
  }
  const { first, last } = range ?? { first: 0, last: stats.size - 1 };
  response.writeHead(range === undefined ? 200 : 206, {
    "content-type": TYPES[extname(path)] ?? "application/octet-stream",
    "content-length": last - first + 1,
    "accept-ranges": "bytes",
    "cache-control": "no-cache",
    "x-content-type-options": "nosniff",
    "content-security-policy": /worker[^/]*\.js$/.test(path) ? WORKER_POLICY : PAGE_POLICY,
    ...(range === undefined ? {} : { "content-range": `bytes ${first}-${last}/${stats.size}` }),
  });
  if (request.method === "HEAD" || stats.size === 0) {
    response.end();
    return;
  }
  createReadStream(path, { start: first, end: last })
    .on("error", () => response.destroy())
    .pipe(response);
}

/** The file that a request names, or undefined where it would leave the served folders. */
function filePath(serving: Serving, url: string): string | undefined {
  let name: string;
  try {
    name = decodeURIComponent(new URL(url, "http://localhost").pathname);
  } catch {
    return undefined;
  }
  const inResult = name.startsWith("/result/");
  const root = inResult ? serving.resultFolder : serving.viewerFolder;
  if (root === undefined || name.includes("\0")) return undefined;
  const wanted = inResult ? name.slice("/result".length) : name === "/" ? "/index.html" : name;
  const path = normalize(join(root, wanted));
  return path.startsWith(normalize(root) + sep) ? path : undefined;
}

/** The first range of a Range header; undefined for the whole file. */
function byteRange(
  header: string | undefined,
  size: number,
): { first: number; last: number } | "unsatisfiable" | undefined {
  const match = /^bytes=(\d*)-(\d*)$/.exec(header ?? "");
  if (match === null || (match[1] === "" && match[2] === "")) return undefined;
  const suffix = match[1] === "";
  const first = suffix ? Math.max(0, size - Number(match[2])) : Number(match[1]);
  const last = suffix || match[2] === "" ? size - 1 : Math.min(size - 1, Number(match[2]));
  return first > last ? "unsatisfiable" : { first, last };
}
