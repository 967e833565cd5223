import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import { notes, table } from "./tabletext.js";

const GAP = Number.NaN;

describe("a long table has a row a value", () => {
  const wanted = {
    places: ["RPT", "VAL"],
    times: ["1961-01-01", "1961-01-02"],
    rows: [
      [15, 14],
      [13, 12],
    ],
  };

  it("told from three columns of which the second holds words", async () => {
    const text =
      "day,station,speed\n1961-01-01,RPT,15\n1961-01-01,VAL,14\n1961-01-02,RPT,13\n1961-01-02,VAL,12\n";
    expect(await table(text)).toEqual(wanted);
  });

  it("told from the names place and value, though the places are numbers", async () => {
    expect(await table("time,place,value\n0,7,1\n0,9,2\n1,7,3\n1,9,4\n")).toEqual({
      places: ["7", "9"],
      times: ["0", "1"],
      rows: [
        [1, 2],
        [3, 4],
      ],
    });
  });

  it("when asked for, by the order time, place, value", async () => {
    expect((await table("a,b,c\n0,7,1\n0,9,2\n", { shape: "long" })).rows).toEqual([[1, 2]]);
  });

  it("with named columns, in any order, others left out", async () => {
    const text = "id,speed,quality,when\nA,1,good,0\nB,2,bad,0\n";
    const wish = { timeColumn: "when", placeColumn: "id", valueColumn: "speed" };
    expect(await table(text, wish)).toEqual({ places: ["A", "B"], times: ["0"], rows: [[1, 2]] });
    expect(await notes(text, wish)).toContain("columns left out: quality");
  });

  it("with the rest told from the names time, place and value", async () => {
    const text = "value,extra,place,date\n1,0,A,2024-01-01\n2,0,B,2024-01-01\n";
    expect(await table(text, { shape: "long" })).toEqual({
      places: ["A", "B"],
      times: ["2024-01-01"],
      rows: [[1, 2]],
    });
  });

  it("without a header row", async () => {
    const text = "1961-01-01,RPT,15\n1961-01-01,VAL,14\n1961-01-02,RPT,13\n1961-01-02,VAL,12\n";
    expect(await table(text)).toEqual(wanted);
  });

  it("whose missing pairs are gaps", async () => {
    expect(await table("t,p,v\n0,A,1\n1,B,2\n2,A,\n", { shape: "long" })).toEqual({
      places: ["A", "B"],
      times: ["0", "1", "2"],
      rows: [
        [1, GAP],
        [GAP, 2],
        [GAP, GAP],
      ],
    });
  });

  it("whose rows are out of time order is sorted, places in order of appearance", async () => {
    const text = "t,p,v\n5,B,1\n-1,A,2\n5,A,3\n2.5,B,4\n-1,B,5\n2.5,A,6\n";
    expect(await table(text)).toEqual({
      places: ["B", "A"],
      times: ["-1", "2.5", "5"],
      rows: [
        [5, 2],
        [4, 6],
        [1, 3],
      ],
    });
  });

  it("is the table that it was made from, whatever the order of its rows", async () => {
    const cells = fc
      .record({ times: fc.integer({ min: 1, max: 6 }), places: fc.integer({ min: 1, max: 4 }) })
      .chain(({ times, places }) =>
        fc.record({
          times: fc.constant(times),
          places: fc.constant(places),
          order: fc.shuffledSubarray(
            Array.from({ length: times * places }, (_, cell) => cell),
            { minLength: times * places },
          ),
        }),
      );
    await fc.assert(
      fc.asyncProperty(cells, async ({ times, places, order }) => {
        const lines = order.map((cell) => {
          const [time, place] = [Math.floor(cell / places), cell % places];
          return `${time},p${place},${cell / 4}`;
        });
        const read = await table(`t,p,v\n${lines.join("\n")}\n`);
        expect(read.times).toEqual(Array.from({ length: times }, (_, time) => String(time)));
        read.rows.forEach((row, time) => {
          row.forEach((value, column) => {
            const place = Number(read.places[column].slice(1));
            expect(value).toBe((time * places + place) / 4);
          });
        });
      }),
    );
  });
});

describe("notes of a long table", () => {
  it("say its columns, its order and its missing pairs", async () => {
    expect(await notes("date,site,speed\n2024-01-02,A,1\n2024-01-01,B,2\n")).toEqual([
      "delimiter: comma",
      'shape: long, a row a value: time column "date", place column "site", value column "speed"',
      'time: column "date", ISO dates, 2024-01-01 to 2024-01-02',
      "order: the rows were sorted by time",
      "2 pairs of time and place have no row and are gaps",
      '2 places from column "site"',
      "gaps: 2, empty, NaN",
    ]);
  });
});
