import type { Box } from "../picture/view.js";
import { numberText } from "../readout/words.js";
import { type Bin, binsOf, rangeWithZero, stepArea, stepPath } from "./bins.js";
import "./margins.css";

interface Props {
  /** One number a cell, in the order in which the cells stand along the edge. */
  readonly values: Float64Array;
  readonly box: Box;
  /** How the field lies along this edge: CSS pixels a cell, and where its first cell begins. */
  readonly scale: number;
  readonly start: number;
  /** Whether the margin stands beside the field; it lies above it otherwise. */
  readonly upright: boolean;
  /** The cell of the cursor, whose number is marked. */
  readonly cursor: number | undefined;
  readonly name: string;
}

const LEAST_BIN = 1.5;
const ENDS = 10;

/** A margin of the field: means along one of its edges, which zoom with it. */
export function Margin({ values, box, scale, start, upright, cursor, name }: Props) {
  const length = upright ? box.height : box.width;
  const [least, greatest] = rangeWithZero(values);
  if (!(greatest > least) || scale <= 0) return null;
  const bins = binsOf(values, -start / scale, (length - start) / scale, length / LEAST_BIN);
  const first = upright ? box.top : box.left;
  const last = first + length;
  const along = (cell: number): number =>
    Math.min(last, Math.max(first, first + start + cell * scale));
  const depth = (upright ? box.width : box.height) - ENDS;
  const up = (number: number): number => {
    const share = (number - least) / (greatest - least);
    return upright ? box.left + share * depth : box.top + box.height - share * depth;
  };
  const merged = bins.some((bin) => bin.to - bin.from > 1);
  const zero = up(0);
  const here = cursor === undefined ? Number.NaN : (values[cursor] ?? Number.NaN);
  const at = cursor === undefined ? Number.NaN : along(cursor + 0.5);
  return (
    <g class="margin-curve">
      <title>{name}</title>
      <path class="margin-told" d={ground(bins, (bin) => Math.max(0, bin.mean))} />
      <path class="margin-misled" d={ground(bins, (bin) => Math.min(0, bin.mean))} />
      {merged ? (
        <path
          class="margin-band"
          d={stepArea(
            bins,
            (bin) => bin.least,
            (bin) => bin.greatest,
            along,
            up,
            upright,
          )}
        />
      ) : null}
      <path class="margin-line" d={stepPath(bins, (bin) => bin.mean, along, up, upright)} />
      <path
        class="margin-zero"
        d={upright ? `M${zero} ${first}V${last}` : `M${first} ${zero}H${last}`}
      />
      {upright ? (
        <>
          <text x={zero} y={first - 9} text-anchor="middle">
            0
          </text>
          <text x={up(greatest)} y={first - 9} text-anchor="middle">
            {shortNumber(greatest)}
          </text>
        </>
      ) : (
        <text x={first - 14} y={up(greatest) + 4} text-anchor="end">
          {shortNumber(greatest)}
        </text>
      )}
      {Number.isNaN(here) || at <= first || at >= last ? null : (
        <circle
          class="margin-here"
          cx={upright ? up(here) : at}
          cy={upright ? at : up(here)}
          r={3.5}
        />
      )}
    </g>
  );

  function ground(all: readonly Bin[], top: (bin: Bin) => number): string {
    return stepArea(all, () => 0, top, along, up, upright);
  }
}

function shortNumber(bits: number): string {
  return numberText(Number(bits.toPrecision(2)));
}
