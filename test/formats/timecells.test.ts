import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import { isoMilliseconds } from "../../src/formats/timecells.js";

const FIRST = Date.parse("0000-01-01T00:00:00Z");
const LAST = Date.parse("9999-12-31T23:59:59Z");

describe("ISO dates", () => {
  it("of all years from 0 to 9999 are what the platform's own clock calendar says", () => {
    fc.assert(
      fc.property(fc.integer({ min: FIRST, max: LAST }), (milliseconds) => {
        const text = new Date(milliseconds).toISOString();
        expect(isoMilliseconds(text)).toBe(milliseconds);
        expect(isoMilliseconds(text.replace("T", " ").replace("Z", ""))).toBe(milliseconds);
        expect(isoMilliseconds(text.slice(0, 10))).toBe(Date.parse(text.slice(0, 10)));
        expect(isoMilliseconds(text.slice(0, 7))).toBe(Date.parse(`${text.slice(0, 7)}-01`));
      }),
      { numRuns: 500 },
    );
  });

  it("with a zone are earlier in UTC by what the zone is ahead", () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 0, max: 23 }),
        fc.integer({ min: 0, max: 59 }),
        fc.constantFrom(1, -1),
        (hours, minutes, sign) => {
          const two = (number: number): string => String(number).padStart(2, "0");
          const zone = `${sign > 0 ? "+" : "-"}${two(hours)}:${two(minutes)}`;
          expect(isoMilliseconds(`2024-02-29T12:00${zone}`)).toBe(
            Date.UTC(2024, 1, 29, 12) - sign * (60 * hours + minutes) * 60_000,
          );
        },
      ),
    );
  });

  it("take the 29th of February in leap years alone (Gregorian calendar)", () => {
    expect(isoMilliseconds("2000-02-29")).toBe(951_782_400_000);
    for (const year of ["1900", "2023", "2100"]) expect(isoMilliseconds(`${year}-02-29`)).toBeNaN();
  });

  for (const text of [
    "2024-00-10",
    "2024-13-01",
    "2024-04-31",
    "2024-01-00",
    "2024-01-01T24:00",
    "2024-01-01T12:60",
    "2024-01-01T12:00:60",
    "2024-01-01T12",
    "2024-1-1",
    "20240101",
    "2024",
    "01/02/2024",
    "",
  ]) {
    it(`"${text}" is none`, () => {
      expect(isoMilliseconds(text)).toBeNaN();
    });
  }
});
