import { createHash } from "node:crypto";
import { describe, expect, it } from "vitest";
import { samples } from "../../samples/catalogue.js";

/** SHA-256 of the files of version 0.1.0: whoever cites a sample can tell that it is still the same. */
const published: Readonly<Record<string, string>> = {
  "rule110.npy": "30e0479e57f1b75a49082640f43454dfb8def89a69c5a1eed9a8e8146234ce41",
  "ormsley.csv": "0972f82622184d5ce141d84440b6bd9ea962365771e1bbff634a93bbeeca8b13",
  "ormsley-links.csv": "36b4a592f6f110a3452e93294d5ed8a8f1a3480d22427454b1022f021b1e8132",
  "ormsley-gauges.csv": "8e176f2ad20f733ff322d01cf15f0e39fa4e7ffcc80d6ab569f12a9d03ab8474",
  "rule54.npy": "81aa9594320bad5017f4344ba0aaccafc8066327d233c7d63ae537a5c92c8a99",
  "life.npy": "18d29631d31fa45f3454a819c8ec1c5084bacdd65db5e49dd472a1c20870df9a",
};

describe("the catalogue", () => {
  for (const sample of samples) {
    it(`${sample.name} makes the bytes that were published`, () => {
      for (const { name, bytes } of sample.files()) {
        expect(createHash("sha256").update(bytes).digest("hex"), name).toBe(published[name]);
      }
    });

    it(`${sample.name} names the file that it maps and the folder for the result`, () => {
      const [file] = sample.files();
      const words = sample.command("demo/").split(" ");
      expect(words.slice(0, 3)).toEqual(["latchmap", "map", `demo/${file?.name}`]);
      expect(words.slice(-2)).toEqual(["--out", `demo/${sample.name}-map`]);
    });
  }

  it("quotes a folder with a space in its name, and names no folder where there is none", () => {
    const [first] = samples;
    expect(first?.command("my demo")).toMatch(/^latchmap map "my demo\/rule110\.npy" /);
    expect(first?.command(".")).toMatch(/^latchmap map rule110\.npy .* --out rule110-map$/);
  });
});
