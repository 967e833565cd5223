import { describe, expect, it } from "vitest";
import { bytesInMemory } from "../../src/formats/bytesource.js";
import { type PositionsRead, readPositions } from "../../src/formats/positions.js";

const read = (text: string): Promise<PositionsRead> =>
  readPositions(bytesInMemory("gauges.csv", new TextEncoder().encode(text)));

describe("a table of positions", () => {
  it("has a column across, one along, and names in any of the others", async () => {
    const found = await read("code,Lat,Lon,name\nVAL,51.9,-10.25,Valentia\nBEL,54.2,,Belmullet\n");
    expect(found.positions).toEqual({
      x: Float64Array.of(-10.25, Number.NaN),
      y: Float64Array.of(51.9, 54.2),
    });
    expect(found.namings).toEqual([
      { by: "code", names: ["VAL", "BEL"] },
      { by: "name", names: ["Valentia", "Belmullet"] },
    ]);
    expect(found.notes).toEqual(['positions: columns "Lon" and "Lat"']);
  });

  it("pairs x with y before degrees", async () => {
    const found = await read("place;lat;x;y\nA;50;1;2\n");
    expect(found.positions).toEqual({ x: Float64Array.of(1), y: Float64Array.of(2) });
  });

  it("without such columns, or with a word for a number, is refused", async () => {
    await expect(read("place,x\nA,1\n")).rejects.toThrow(/gauges.csv, row 1: .*only place, x/);
    await expect(read("x,y\n1,2\n")).rejects.toThrow(/no columns of a name and a position/);
    await expect(read("place,x,y\nA,1,far\n")).rejects.toThrow(/row 2, column "y": "far"/);
  });
});
