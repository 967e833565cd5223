import { describe, expect, it } from "vitest";
import { table } from "./tabletext.js";

const GAP = Number.NaN;

describe("blank lines", () => {
  it("at the end are nothing", async () => {
    expect((await table("a,b\n1,2\n\n  \n\n")).rows).toEqual([[1, 2]]);
    expect((await table("a\n1\n\n\n")).rows).toEqual([[1]]);
  });

  it("between the rows of one column are gaps", async () => {
    expect((await table("a\n1\n\n\n2\n\n")).rows).toEqual([[1], [GAP], [GAP], [2]]);
  });

  it("differ from a quoted empty cell, which is a gap wherever it stands", async () => {
    expect((await table('a\n1\n""\n')).rows).toEqual([[1], [GAP]]);
    expect((await table('a\r\n1\r\n\r\n""\r\n\r\n')).rows).toEqual([[1], [GAP], [GAP]]);
  });

  it("before the header are passed over", async () => {
    expect((await table("\n\na,b\n1,2\n")).places).toEqual(["a", "b"]);
  });
});

describe("the parts of the text are told from its content", () => {
  const wanted = {
    places: ["a", "b"],
    times: ["0", "1"],
    rows: [
      [1.5, 2],
      [3, 4],
    ],
  };
  for (const [title, text] of [
    ["commas", "a,b\n1.5,2\n3,4\n"],
    ["tabs", "a\tb\n1.5\t2\n3\t4\n"],
    ["semicolons", "a;b\n1.5;2\n3;4\n"],
    ["Windows line ends", "a,b\r\n1.5,2\r\n3,4\r\n"],
    ["old Macintosh line ends", "a,b\r1.5,2\r3,4\r"],
    ["mixed line ends", "a,b\r\n1.5,2\n3,4"],
    ["no line end at the end", "a,b\n1.5,2\n3,4"],
    ["a byte order mark", "\ufeffa,b\n1.5,2\n3,4\n"],
    ["a quoted last cell before a lone return", '"a","b"\n1.5,2\n3,"4"\r'],
    ["blanks around cells", " a ,b \n 1.5, 2\n3 ,4\n"],
  ] as const) {
    it(title, async () => {
      expect(await table(text)).toEqual(wanted);
    });
  }

  it("a delimiter inside quotes does not count", async () => {
    expect((await table('"a,x";"b,y"\n1;2\n')).places).toEqual(["a,x", "b,y"]);
  });

  it("the delimiter may be asked for", async () => {
    expect((await table("a;b,c\n1,2\n", { delimiter: "," })).places).toEqual(["a;b", "c"]);
  });

  it("rows longer than the first stretch that is looked at", async () => {
    const columns = Array.from({ length: 20_000 }, (_, i) => i);
    const text = `${columns.map((i) => `place${i}`).join()}\n${columns.join()}\n`;
    const { places, rows } = await table(text);
    expect(places[19_999]).toBe("place19999");
    expect(rows).toEqual([columns]);
  });
});
