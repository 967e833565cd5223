import { countText } from "../recording/counttext.js";
import { latchmapError } from "../recording/errors.js";
import type { Survey } from "../recording/survey.js";
import type { Coding } from "./coding.js";
import { LARGEST_ALPHABET } from "./rule.js";

/**
 * The coding whose alphabet is the distinct whole numbers of a recording, ascending.
 * @throws {LatchmapError} `bad-setting` where there are fractions, `too-many-states` beyond 65,536
 */
export function exactCoding(survey: Survey): Coding {
  if (survey.fraction !== undefined) {
    throw latchmapError(
      "bad-setting",
      `${survey.fraction} is not a whole number, and exact states take whole numbers only`,
      "Cut the values into bins with --states quantile:4 or --states width:4",
      { option: "--states exact" },
    );
  }
  if (survey.symbols === undefined) {
    throw latchmapError(
      "too-many-states",
      `there are more than ${countText(LARGEST_ALPHABET)} distinct values, the most that exact states hold`,
      "Cut the values into bins with --states quantile:4 or --states width:4",
      { option: "--states exact" },
    );
  }
  return { kind: "exact", alphabet: survey.symbols.length, symbols: survey.symbols };
}
