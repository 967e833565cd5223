import { describe, expect, it } from "vitest";
import { bytesInMemory } from "../../src/formats/bytesource.js";
import { readGroups } from "../../src/formats/groups.js";
import { refusal } from "./refusal.js";

const PLACES = ["RPT", "VAL", "ROS"];

function read(text: string, places: readonly string[] = PLACES): ReturnType<typeof readGroups> {
  return readGroups(bytesInMemory("coast.csv", new TextEncoder().encode(text)), places);
}

describe("groups of places", () => {
  it("come in order of first appearance, whatever the order of the places", async () => {
    const { groupOf, names } = await read("place,group\nROS,west\nRPT,east\nVAL,west\n");
    expect(names).toEqual(["west", "east"]);
    expect(Array.from(groupOf)).toEqual([1, 0, 0]);
  });

  it("are told by the header, other columns passed over", async () => {
    const text = '\ufeffGroup;height;Place\r\n"a;b";12;VAL\r\n\r\nc;;RPT\r\nc;3;ROS\r\n';
    const { groupOf, names } = await read(text);
    expect(names).toEqual(["a;b", "c"]);
    expect(Array.from(groupOf)).toEqual([1, 0, 1]);
  });

  for (const [title, text, line] of [
    [
      "an unknown place",
      "place,group\nRPT,a\nKIL,a\n",
      'bad-setting: coast.csv, row 3: the recording has no place "KIL". Name its places, which are RPT, VAL, ROS.',
    ],
    [
      "a place twice",
      "place,group\nRPT,a\nVAL,a\nRPT,b\n",
      'bad-setting: coast.csv, row 4: the place "RPT" has a group already, from row 2. Give every place once.',
    ],
    [
      "places without a group",
      "place,group\nVAL,a\n",
      "bad-setting: coast.csv: 2 places have no group: RPT, ROS. Give every place of the recording a row.",
    ],
    [
      "an empty group",
      "place,group\nRPT,a\nVAL,\n",
      'ragged-table: coast.csv, row 3, column "group": the group is empty. Give every row a place and its group.',
    ],
    [
      "no header",
      "RPT,a\nVAL,a\nROS,b\n",
      'missing-column: coast.csv: the header row has no column "place". Begin the table with the row place,group.',
    ],
    ["nothing", "", "empty-file: coast.csv: the file is empty. Check how it was written."],
  ] as const) {
    it(`${title} is refused`, async () => {
      expect(await refusal(read(text))).toBe(line);
    });
  }

  it("name only some of many places in a message", async () => {
    const places = Array.from({ length: 100 }, (_, i) => `p${i}`);
    expect(await refusal(read("place,group\np0,a\n", places))).toContain(
      "99 places have no group: p1, p2, p3, p4, p5, p6, p7, p8, p9, p10, p11, p12 and 87 more.",
    );
  });
});
