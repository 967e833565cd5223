// Compiles the kernels to WebAssembly and writes them as base64 text, so that they load in Node, in
// tests and in a browser worker without a fetch. Does nothing when the sources have not changed.
import { createHash } from "node:crypto";
import { readdirSync, readFileSync, writeFileSync } from "node:fs";
import { fileURLToPath } from "node:url";
import asc from "assemblyscript/asc";

const here = new URL(".", import.meta.url);
const target = new URL("binary.ts", here);
const sources = readdirSync(new URL("assembly/", here))
  .filter((name) => name.endsWith(".ts"))
  .sort();
const files = new Map(
  sources.map((name) => [name, readFileSync(new URL(`assembly/${name}`, here), "utf8")]),
);
const hash = createHash("sha256");
for (const [name, text] of files) hash.update(`${name}\0${text}\0`);
hash.update(readFileSync(fileURLToPath(import.meta.url)));
const stamp = `// sources ${hash.digest("hex")}`;

let built = "";
try {
  built = readFileSync(target, "utf8");
} catch {
  // not built yet
}

if (!built.startsWith(stamp)) {
  let binary;
  const { error, stderr } = await asc.main(
    [
      "index.ts",
      "--outFile",
      "kernels.wasm",
      "-O3",
      "--noAssert",
      "--runtime",
      "stub",
      "--importMemory",
      "--enable",
      "simd",
    ],
    {
      readFile: (name) => files.get(name) ?? null,
      writeFile: (_name, contents) => {
        binary = contents;
      },
      listFiles: () => [],
    },
  );
  if (error) {
    console.error(stderr.toString());
    console.error("The kernels did not compile.");
    process.exit(1);
  }
  const text = Buffer.from(binary).toString("base64");
  const lines = text.match(/.{1,100}/g) ?? [];
  const literal = lines.map((line) => `  "${line}"`).join(" +\n");
  writeFileSync(
    target,
    `${stamp}\n/** The compiled kernels, base64. */\nexport const binary =\n${literal};\n`,
  );
}
