import { describe, expect, it } from "vitest";
import type { TableWish } from "../../src/formats/tablehead.js";
import { refused } from "./tabletext.js";

type Case = readonly [title: string, text: string, line: string, wish?: TableWish];

function each(cases: readonly Case[]): void {
  for (const [title, text, line, wish] of cases) {
    it(title, async () => {
      expect(await refused(text, wish)).toBe(line);
    });
  }
}

const MARK = "Mark gaps as empty cells, or name the word with --gap";
const POINT = "Write a point before decimals and no thousands separators, as in 1234.5.";
const SORT =
  "Sort the rows by time, one row a time; if each row is one value of one place, say --shape long.";

describe("a cell that is no number is refused, with row, column and remedy", () => {
  each([
    [
      "a word",
      `date,KIL\n${Array.from({ length: 416 }, (_, i) => `${i},1`).join("\n")}\n416,n/a\n`,
      `not-a-number: wind.csv, row 418, column "KIL": "n/a" is not a number. ${MARK} "n/a".`,
    ],
    [
      "a word in a table without a header",
      "1,2\n3,x\n",
      `not-a-number: wind.csv, row 2, column 2: "x" is not a number. ${MARK} "x".`,
    ],
    [
      "a word in row 1 of a table without a header",
      "1,n/a\n3,4\n",
      `not-a-number: wind.csv, row 1, column 2: "n/a" is not a number. ${MARK} "n/a".`,
    ],
    [
      "a word that stands for a missing value before numbers",
      "NA,2\n3,4\n",
      `not-a-number: wind.csv, row 1, column 1: "NA" is not a number. ${MARK} "NA".`,
    ],
    [
      "another word than the one that is named",
      "a\n1\nn/a\n-\n",
      `not-a-number: wind.csv, row 4, column "a": "-" is not a number. ${MARK} "-".`,
      { gap: "n/a" },
    ],
    [
      "a word below a quoted cell of two lines: rows are lines of the file",
      '"a\nb",c\n1,2\n3,x\n',
      `not-a-number: wind.csv, row 4, column "c": "x" is not a number. ${MARK} "x".`,
    ],
    [
      "a word below a gap of blank lines",
      "a\n1\n\n\nx\n",
      `not-a-number: wind.csv, row 5, column "a": "x" is not a number. ${MARK} "x".`,
    ],
    [
      "hexadecimal",
      "a\n0x10\n",
      `not-a-number: wind.csv, row 2, column "a": "0x10" is not a number. ${MARK} "0x10".`,
    ],
    [
      "hexadecimal after a blank",
      "a\n 0x10\n",
      `not-a-number: wind.csv, row 2, column "a": "0x10" is not a number. ${MARK} "0x10".`,
    ],
    [
      "digits with an underscore",
      "a\n1_000\n",
      `not-a-number: wind.csv, row 2, column "a": "1_000" is not a number. ${MARK} "1_000".`,
    ],
    [
      "a decimal comma",
      "a;b\n1;9,3\n",
      `not-a-number: wind.csv, row 2, column "b": "9,3" is not a number. ${POINT}`,
    ],
    [
      "thousands separators",
      "a;b\n1;1.234,5\n",
      `not-a-number: wind.csv, row 2, column "b": "1.234,5" is not a number. ${POINT}`,
    ],
    [
      "a date where a value belongs",
      "a,b\n1,31/01/1961\n",
      'not-a-number: wind.csv, row 2, column "b": "31/01/1961" is not a number. Write dates as 1961-01-31, and name their column with --time-column.',
    ],
    [
      "a whole number that float64 does not hold",
      "a\n9007199254740993\n",
      'not-a-number: wind.csv, row 2, column "a": "9007199254740993" is beyond ±2^53, where float64 holds no longer every whole number. Write numbers nearer to 0, or round it as in 9.01e15.',
    ],
    [
      "a long word with line ends is shown short, on one line",
      `a,b\n1,"two\nlines ${"and more ".repeat(9)}"\n`,
      `not-a-number: wind.csv, row 2, column "b": "two\\nlines and more and more and more …" is not a number. ${MARK} "two\\nlines and more and more and more …".`,
    ],
  ]);
});

describe("a table that does not hold together is refused", () => {
  each([
    [
      "too few cells",
      "a,b\n1,2\n3\n4,5\n",
      "ragged-table: wind.csv, row 3: there is 1 cell where the header has 2. Give every row the same number of cells; an empty cell is a gap.",
    ],
    [
      "too many cells, without a header",
      "1,2\n3,4,5\n",
      "ragged-table: wind.csv, row 2: there are 3 cells where the first row has 2. Give every row the same number of cells; an empty cell is a gap.",
    ],
    [
      "a blank line between the rows of several columns",
      "a,b\n1,2\n\n4,5\n",
      "ragged-table: wind.csv, row 3: there is 1 cell where the header has 2. Give every row the same number of cells; an empty cell is a gap.",
    ],
    [
      "a name twice",
      "KIL,SHA,KIL\n1,2,3\n",
      'missing-column: wind.csv, column "KIL": the name stands over columns 1 and 3. Give every column a name of its own in the header row.',
    ],
    [
      "a column without a name",
      "a,b,\n1,2,3\n",
      "missing-column: wind.csv, column 3: the column has no name in the header row. Give every column a name, or take the column out.",
    ],
    [
      "times alone",
      "date\n2024-01-01\n",
      "missing-column: wind.csv: the column of times stands alone, without a column of values. Add a column a place.",
    ],
    [
      "a quote that is never closed",
      'a,b\n1,"2\n3,4\n',
      'damaged-file: wind.csv, row 2: a quoted cell is opened and never closed. Close every quote, and double those inside a quoted cell, as in "5"" pipe".',
    ],
    [
      "a quote that is never closed in row 1",
      'a,"b\n1,2\n',
      'damaged-file: wind.csv, row 1: a quoted cell is opened and never closed. Close every quote, and double those inside a quoted cell, as in "5"" pipe".',
    ],
    [
      "more after a closing quote",
      'a,b\n1,2\n"3"x,4\n5,6\n',
      'damaged-file: wind.csv, row 3: a quoted cell goes on after its closing quote. Close every quote, and double those inside a quoted cell, as in "5"" pipe".',
    ],
    ["nothing", "", "empty-file: wind.csv: the file is empty. Check how it was written."],
    [
      "blank lines alone",
      "\n  \n\n",
      "empty-file: wind.csv: there are only blank lines. Check how it was written.",
    ],
    [
      "a header alone",
      "date,a\n\n",
      "empty-file: wind.csv: there is a header row and nothing below it. Check how it was written.",
    ],
  ]);
});

describe("times that do not fit are refused", () => {
  each([
    [
      "going back in a wide table",
      "date,a\n2024-01-01,1\n2024-01-03,2\n2024-01-02,3\n",
      `bad-time: wind.csv, row 4, column "date": the time "2024-01-02" goes back behind that of row 3. ${SORT}`,
    ],
    [
      "repeated in a wide table",
      "step,a,b\n1,5,1\n1,6,2\n",
      `bad-time: wind.csv, row 3, column "step": the time "1" repeats that of row 2. ${SORT}`,
    ],
    [
      "a date that is none",
      "date,a\n2023-02-28,1\n2023-02-29,2\n",
      'bad-time: wind.csv, row 3, column "date": "2023-02-29" is not an ISO date, as the first time is. Write every time as 1961-01-31 or 1961-01-31T13:45Z.',
    ],
    [
      "a date that is written otherwise",
      "date,a\n01/02/1961,1\n",
      'bad-time: wind.csv, row 2, column "date": "01/02/1961" is not a time. Write every time as a number, or every one as an ISO date such as 1961-01-31.',
    ],
    [
      "an empty one",
      "time,a\n1,1\n,2\n",
      'bad-time: wind.csv, row 3, column "time": the time is empty. Write every time as a number, or every one as an ISO date such as 1961-01-31.',
    ],
    [
      "a number that float64 does not hold",
      "time,a\n1709164800000000001,1\n",
      'bad-time: wind.csv, row 2, column "time": the time "1709164800000000001" is beyond ±2^53, where float64 holds no longer every whole number. Count times from a later start, or in a coarser unit.',
    ],
  ]);
});

describe("a long table with a fault is refused", () => {
  each([
    [
      "a pair of time and place twice",
      "time,place,value\n0,A,1\n0,B,2\n1,A,3\n0,A,\n",
      "ragged-table: wind.csv, row 5, place A: this time and place have a value already, in row 2. Keep one row for every pair of time and place.",
    ],
    [
      "a place without a name",
      "time,place,value\n0,A,1\n0, ,2\n",
      'missing-column: wind.csv, row 3, column "place": the name of the place is empty. Name a place in every row.',
    ],
    [
      "a value that is no number",
      "time,place,value\n0,A,1\n0,B,x\n",
      `not-a-number: wind.csv, row 3, column "value": "x" is not a number. ${MARK} "x".`,
    ],
    [
      "columns that are not clear",
      "a,b,c,d\n1,2,3,4\n",
      "missing-column: wind.csv: a long table needs a column each for time, place and value, and which of the 4 they are is not clear. Name them with --time-column, --place-column and --value-column.",
      { shape: "long" },
    ],
    [
      "one column for two things",
      "a,b,c\n1,2,3\n",
      "bad-setting: wind.csv: one column is named for two of time, place and value. Name three different columns.",
      { placeColumn: "a", valueColumn: "a" },
    ],
    [
      "more cells than can be held",
      `time,place,value\n${Array.from({ length: 20_000 }, (_, i) => `${i},p${i},1`).join("\n")}\n`,
      "bad-setting: wind.csv: 20,000 times × 20,000 places make 400,000,000 cells, more than 268,435,456. Check the columns of time and place, or save the values as an NPY array [time, place].",
    ],
  ]);
});

describe("a wish that does not fit the table is refused", () => {
  each([
    [
      "a grid",
      "a,b\n1,2\n",
      "bad-setting: wind.csv, --layout: a table does not say how many rows and columns a grid would have. Save the values as an NPY array [time, row, column], or say --layout line or network.",
      { layout: "grid" },
    ],
    [
      "joined ends without a line",
      "a,b\n1,2\n",
      "bad-setting: wind.csv, --wrap: the places are read as a network, which has no ends to join. Leave --wrap out, or say --layout line.",
      { wrap: true },
    ],
    [
      "a column that is not there",
      "a,b\n1,2\n",
      'missing-column: wind.csv, --time-column: there is no column "when". Name one of a, b.',
      { timeColumn: "when" },
    ],
    [
      "a column by name without a header",
      "1,2\n3,4\n",
      'missing-column: wind.csv, --time-column: there is no header row that could name a column "when". Put a row with the names of the columns first.',
      { timeColumn: "when" },
    ],
    [
      "a column of places in a wide table",
      "a,b,c\n1,2,3\n",
      "bad-setting: wind.csv, --shape: only a long table has a column of places and one of values. Say --shape long, or leave --place-column and --value-column out.",
      { shape: "wide", placeColumn: "a" },
    ],
  ]);
});
