import { describe, expect, it } from "vitest";
import { placeName } from "../../src/recording/recording.js";
import { openFile } from "../../src/run/files.js";
import { openRecording } from "../../src/run/open.js";
import { silentProgress } from "../../src/run/progress.js";
import { recordFaults } from "../../src/run/recordfaults.js";
import { CHECKS } from "./reference.js";

/** The faults that are found in an open record, as `KIND at PLACE, START to END`. */
async function faultsIn(file: string): Promise<string[]> {
  const source = await openFile(`${CHECKS}${file}`);
  const { recording } = await openRecording(source, {});
  const faults = await recordFaults(recording, silentProgress);
  await source.close();
  return faults.map(
    ({ kind, place, start, end }) =>
      `${kind} at ${placeName(recording, place)}, ${start} to ${end}`,
  );
}

describe("records of the open air", () => {
  // Haslett & Raftery 1989, Applied Statistics 38:1–50: published as a complete record.
  it("78,888 daily winds at 12 stations hold no spell that looks like a fault", async () => {
    expect(await faultsIn("data/wind.csv")).toEqual([]);
  });

  // Daily PM10, Germany, AirBase of the European Environment Agency: stations that began later are
  // empty until then, as the first and last rows of each column show.
  it("stations that were built later are silent until then, and nothing else is at fault", async () => {
    expect((await faultsIn("reference/data/air_open.csv")).sort()).toEqual([
      "silent at DEBE056, 0 to 1254",
      "silent at DEMV017, 0 to 365",
      "silent at DENI058, 0 to 434",
      "silent at DENI063, 0 to 432",
      "silent at DERP013, 0 to 643",
      "silent at DEUB004, 0 to 1339",
    ]);
  });
});
