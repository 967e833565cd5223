import { readFileSync } from "node:fs";
import { fileURLToPath } from "node:url";
import { describe, expect, it } from "vitest";
import { bytesInMemory } from "../../src/formats/bytesource.js";
import { openDelimited } from "../../src/formats/delimited.js";
import { notes, table, tableOf, textFile } from "./tabletext.js";

const GAP = Number.NaN;

describe("a wide table has a column a place", () => {
  it("with a column of ISO dates", async () => {
    expect(await table("date,RPT,VAL\n1961-01-01,15.04,14.96\n1961-01-02,14.71,16.88\n")).toEqual({
      places: ["RPT", "VAL"],
      times: ["1961-01-01", "1961-01-02"],
      rows: [
        [15.04, 14.96],
        [14.71, 16.88],
      ],
    });
  });

  it("without a column of times: steps count from 0", async () => {
    expect(await table("a,b\n1,2\n3,4\n")).toEqual({
      places: ["a", "b"],
      times: ["0", "1"],
      rows: [
        [1, 2],
        [3, 4],
      ],
    });
  });

  it("of one column of values: a network of one node", async () => {
    const { recording } = await openDelimited(textFile("speed\n1\n0\n1\n"));
    expect(recording.layout).toEqual({ kind: "network", nodes: 1 });
    expect(recording.timeSteps).toBe(3);
    expect(recording.names).toEqual(["speed"]);
  });

  it("without a header row, when row 1 holds numbers", async () => {
    expect(await table("0,1,1\n1,0,1\n")).toEqual({
      places: ["0", "1", "2"],
      times: ["0", "1"],
      rows: [
        [0, 1, 1],
        [1, 0, 1],
      ],
    });
    expect((await openDelimited(textFile("0,1,1\n1,0,1\n"))).recording.names).toBeUndefined();
  });

  it("without a header row but with dates", async () => {
    expect(await table("2024-01-01,5,6\n2024-01-02,7,8\n")).toEqual({
      places: ["0", "1"],
      times: ["2024-01-01", "2024-01-02"],
      rows: [
        [5, 6],
        [7, 8],
      ],
    });
  });

  it("with the index of a data frame: an empty name before 0, 1, 2 and so on", async () => {
    expect(await table(",0,1\n0,5,6\n1,7,8\n")).toEqual({
      places: ["0", "1"],
      times: ["0", "1"],
      rows: [
        [5, 6],
        [7, 8],
      ],
    });
  });

  it("with a gap in the first cell of a table without a header", async () => {
    expect((await table(",2,3\n4,5,6\n")).rows).toEqual([
      [GAP, 2, 3],
      [4, 5, 6],
    ]);
  });
});

describe("the column of times", () => {
  for (const name of ["time", "Date", "STEP", "timestamp", "year", "Time (s)", "time_step"]) {
    it(`is the first when it is called ${name}`, async () => {
      const { recording } = await openDelimited(textFile(`${name},a\n1990,1\n1991,2\n`));
      expect(recording.names).toEqual(["a"]);
      expect(recording.time).toEqual({
        kind: "numbers",
        name,
        values: Float64Array.of(1990, 1991),
      });
    });
  }

  it("is the one that is named, wherever it stands", async () => {
    expect(await table("a,when,b\n1,5,2\n3,7.5,4\n", { timeColumn: "when" })).toEqual({
      places: ["a", "b"],
      times: ["5", "7.5"],
      rows: [
        [1, 2],
        [3, 4],
      ],
    });
  });

  it("is none when the first is a place called like no time", async () => {
    expect((await table("T,U\n1,2\n2,3\n")).places).toEqual(["T", "U"]);
  });

  // Milliseconds worked by hand: 2024-02-29 is 19,782 days after 1970-01-01.
  const day = 19_782 * 86_400_000;
  for (const [text, milliseconds] of [
    ["2024-02-29", day],
    ["2024-02-29T13:45", day + 49_500_000],
    ["2024-02-29 13:45:06", day + 49_506_000],
    ["2024-02-29T13:45:06.25Z", day + 49_506_250],
    ["2024-02-29T13:45+01:00", day + 45_900_000],
    ["2024-02-29 13:45:06 -0330", day + 62_106_000],
    ["2024-02-29T00:00+14", day - 50_400_000],
    ["2024-02", day - 28 * 86_400_000],
  ] as const) {
    it(`reads ${text}, UTC where no zone is given`, async () => {
      const { recording } = await openDelimited(textFile(`when,a\n${text},1\n`));
      expect(recording.time).toEqual({
        kind: "dates",
        name: "when",
        values: Float64Array.of(milliseconds),
      });
    });
  }
});

describe("cells", () => {
  it("that are empty or NaN are gaps", async () => {
    expect((await table("a,b\n,nan\nNaN,-nan\n 1 ,  \n")).rows).toEqual([
      [GAP, GAP],
      [GAP, GAP],
      [1, GAP],
    ]);
  });

  it("that hold the named word are gaps", async () => {
    expect((await table("a,b\nn/a,1\n2, n/a \n", { gap: "n/a" })).rows).toEqual([
      [GAP, 1],
      [2, GAP],
    ]);
  });

  it("that hold the named number are gaps in every spelling", async () => {
    expect((await table("a,b\n-999,1\n-999.0,-9.99e2\n", { gap: "-999" })).rows).toEqual([
      [GAP, 1],
      [GAP, GAP],
    ]);
  });

  it("read as the numbers that they spell", async () => {
    const cells = ["1", "-2.5", "+3", ".5", "6.", "1e3", "-1.5E-3", "007", "9007199254740992"];
    expect((await table(`${cells.map((_, i) => `c${i}`).join()}\n${cells.join()}\n`)).rows).toEqual(
      [[1, -2.5, 3, 0.5, 6, 1000, -0.0015, 7, 2 ** 53]],
    );
  });

  it("that are infinite are read as infinite, for a later room to refuse", async () => {
    expect((await table("a,b,c\nInfinity,-inf,1e999\n")).rows).toEqual([
      [Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY, Number.POSITIVE_INFINITY],
    ]);
  });

  it("may be quoted, with delimiters, doubled quotes and line ends inside", async () => {
    expect(await table('"a, b","say ""c""","two\nlines"\n"1",2,"3"\n')).toEqual({
      places: ["a, b", 'say "c"', "two lines"],
      times: ["0"],
      rows: [[1, 2, 3]],
    });
  });
});

describe("the values come in the smallest array that holds them", () => {
  for (const [title, text, element, mayHaveGaps] of [
    ["uint8 for whole numbers from 0 to 255", "a\n0\n255\n", "uint8", false],
    ["int32 for other whole numbers", "a\n0\n-1\n2147483647\n", "int32", false],
    ["float64 beyond int32", "a\n0\n2147483648\n", "float64", false],
    ["float64 with fractions", "a\n0\n0.5\n", "float64", false],
    ["float64 with gaps", "a\n0\nnan\n", "float64", true],
  ] as const) {
    it(title, async () => {
      const { recording } = await openDelimited(textFile(text));
      expect(recording.element).toBe(element);
      expect(recording.mayHaveGaps).toBe(mayHaveGaps);
    });
  }

  it("and nothing is lost where the array changes over late", async () => {
    const numbers = Array.from({ length: 5000 }, (_, i) => i % 256);
    const rows = [...numbers, -7, 1e6, 0.25, 3];
    const text = `a\n${rows.join("\n")}\n`;
    expect((await table(text)).rows.map(([value]) => value)).toEqual(rows);
  });
});

describe("the layout", () => {
  it("is a network, or a line when asked", async () => {
    const layout = async (wish: object): Promise<unknown> =>
      (await openDelimited(textFile("a,b\n1,2\n"), wish)).recording.layout;
    expect(await layout({})).toEqual({ kind: "network", nodes: 2 });
    expect(await layout({ layout: "line" })).toEqual({ kind: "line", cells: 2, wrap: false });
    expect(await layout({ layout: "line", wrap: true })).toEqual({
      kind: "line",
      cells: 2,
      wrap: true,
    });
  });
});

describe("notes say all that was told from the content", () => {
  it("of a table with header and dates", async () => {
    expect(await notes("date,a,b\n1961-01-01,1,\n1961-01-02,2,3\n")).toEqual([
      "delimiter: comma",
      "shape: wide, a column a place",
      'time: column "date", ISO dates, 1961-01-01 to 1961-01-02',
      "2 places from the header",
      "gaps: 1, empty, NaN",
    ]);
  });

  it("of a table of bare numbers", async () => {
    expect(await notes("1\t2\n3\t4\n")).toEqual([
      "delimiter: tab",
      "header: none, row 1 holds values already",
      "shape: wide, a column a place",
      "time: there is no column of times, so steps count from 0",
      "2 places without names",
      "gaps: none",
    ]);
  });

  it("of one column, with a word for gaps", async () => {
    expect(await notes("a\n1\nn/a\n", { gap: "n/a" })).toEqual([
      "delimiter: none, there is one column",
      "shape: wide, a column a place",
      "time: there is no column of times, so steps count from 0",
      "1 place from the header",
      'gaps: 1, empty, NaN or "n/a"',
    ]);
  });

  it("of a nameless index", async () => {
    expect(await notes(",x\n3,1\n4,2\n")).toContain("time: column 1, numbers, 3 to 4");
  });
});

describe("the wind data", () => {
  const path = fileURLToPath(new URL("../checks/data/wind.csv", import.meta.url));
  const source = bytesInMemory("wind.csv", Uint8Array.from(readFileSync(path)));

  it("are 6,574 days at 12 stations, first and last row as in the file", async () => {
    const { places, times, rows } = await tableOf(source);
    expect(places.join()).toBe("RPT,VAL,ROS,KIL,SHA,BIR,DUB,CLA,MUL,CLO,BEL,MAL");
    expect(rows).toHaveLength(6574);
    expect([times[0], times[6573]]).toEqual(["1961-01-01", "1978-12-31"]);
    const lines = readFileSync(path, "utf8").trim().split("\n");
    for (const row of [0, 1, 3000, 6573]) {
      const [day, ...cells] = lines[row + 1].split(",");
      expect(times[row]).toBe(day);
      expect(rows[row]).toEqual(cells.map(Number));
    }
  });
});
