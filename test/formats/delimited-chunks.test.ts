import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import { bytesInMemory } from "../../src/formats/bytesource.js";
import { LatchmapError } from "../../src/recording/errors.js";
import { type Table, tableOf } from "./tabletext.js";

const TABLES: Readonly<Record<string, string>> = {
  "quoted cells": '"a","b, c","d ""e"""\n1,"2",3\n"4",5,"6"\n',
  "quoted line ends": '"two\nlines",b\n"1",2\n3,"4"\n',
  "Windows line ends": '"a","b"\r\n1,2\r\n"3","4"\r\n\r\n',
  "Windows line ends in quotes": '"two\r\nlines","b"\r\n1,2\r\n"3","4"\r\n',
  "old Macintosh line ends": '"a\rb",c\r1,2\r"3","4"\r',
  "letters of two, three and four bytes": "é,€,𝄞\n1,2,3\n4,5,6\n",
  "a byte order mark": "\ufeffé;b\n1;2\n",
  "blank lines and quoted empty cells": 'a\n1\n\n""\n\n2\n""\n\n\n',
  "a word that is no number": "a,b\n1,2\n3,x\n4,5\n",
  "a ragged row": "a,b\n1,2\n3\n4,5\n",
  "a quote never closed": 'a,b\n1,"2\n3,4\n5,6\n',
  "more after a closing quote": 'a,b\n1,2\n"3"x,4\n"5",6\n',
  "blanks after closing quotes": '"a" ,b\n"1" ,2\n3,"4" \n',
  "a long table": 'time,place,value\n0,"é,1",1\n0,B,2\n1,"é,1",3\n',
};

async function outcome(text: string, chunk?: number): Promise<Table | string> {
  const source = bytesInMemory("a.csv", new TextEncoder().encode(text));
  try {
    return await tableOf(source, {}, chunk);
  } catch (error) {
    if (error instanceof LatchmapError) return error.message;
    throw error;
  }
}

/** Numbers that JavaScript writes with a fraction or an exponent where they are large. */
const doubles = fc
  .double({ noDefaultInfinity: true })
  .filter((value) => !(Math.abs(value) >= 2 ** 53) || String(value).includes("e"));

describe("chunk borders leave no trace", () => {
  for (const [title, text] of Object.entries(TABLES)) {
    it(`in ${title}, whatever the size of the chunks`, async () => {
      const whole = await outcome(text);
      const size = new TextEncoder().encode(text).length;
      for (let chunk = 1; chunk <= size; chunk++) {
        expect(await outcome(text, chunk), `chunks of ${chunk} bytes`).toEqual(whole);
      }
    });
  }

  it("in texts made of the characters that matter", async () => {
    const pieces = fc.constantFrom(
      "1",
      "2.5",
      "é",
      "€",
      '"',
      '""',
      ",",
      ",",
      "\n",
      "\r\n",
      " ",
      "x",
    );
    const text = fc.array(pieces, { minLength: 1, maxLength: 40 }).map((parts) => parts.join(""));
    await fc.assert(
      fc.asyncProperty(text, fc.integer({ min: 1, max: 12 }), async (drawn, chunk) => {
        expect(await outcome(drawn, chunk)).toEqual(await outcome(drawn));
      }),
      { numRuns: 2000 },
    );
  });

  it("and tables written with any quoting read back, in any chunks", async () => {
    const name = fc.string({
      unit: fc.constantFrom("a", "é", "€", '"', ",", ";", "\n"),
      minLength: 1,
    });
    const drawn = fc
      .record({
        names: fc.uniqueArray(name, { minLength: 2, maxLength: 4, selector: seen }),
        steps: fc.integer({ min: 1, max: 5 }),
        end: fc.constantFrom("\n", "\r\n"),
        delimiter: fc.constantFrom("," as const, ";" as const, "\t" as const),
        chunk: fc.integer({ min: 1, max: 30 }),
      })
      .filter(({ names }) => names.every((each) => seen(each) !== ""))
      .chain((made) => {
        const cells = made.steps * made.names.length;
        return fc
          .array(doubles, { minLength: cells, maxLength: cells })
          .map((numbers) => ({ ...made, numbers }));
      });
    await fc.assert(
      fc.asyncProperty(drawn, async ({ names, numbers, end, delimiter, chunk }) => {
        const quote = (cell: string): string => `"${cell.replaceAll('"', '""')}"`;
        const cells = numbers.map((value, i) =>
          i % 3 === 0 ? quote(String(value)) : String(value),
        );
        const lines = [names.map(quote).join(delimiter)];
        for (let i = 0; i < cells.length; i += names.length) {
          lines.push(cells.slice(i, i + names.length).join(delimiter));
        }
        const text = lines.join(end) + end;
        const source = bytesInMemory("a.csv", new TextEncoder().encode(text));
        const read = await tableOf(source, { delimiter }, chunk);
        expect(read.places).toEqual(names.map(seen));
        expect(read.rows.flat()).toEqual(numbers.map((value) => value + 0));
      }),
    );
  });
});

/** A name as it is read: blanks at its ends dropped, those inside made one space. */
function seen(name: string): string {
  return name.trim().replace(/\s+/g, " ");
}
