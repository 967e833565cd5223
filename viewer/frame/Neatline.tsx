import { BAND } from "../field/chartlayout.js";
import type { Box, View } from "../picture/view.js";
import type { Axes } from "./axes.js";
import "./neatline.css";
import { fitted } from "./textwidth.js";
import type { Tick } from "./ticks.js";

interface Props {
  readonly plot: Box;
  readonly frame: Box;
  readonly view: View;
  readonly axes: Axes;
  readonly font: string;
  /** The room that labels have at the left. */
  readonly labelRoom: number;
  /** Which sides bear labels; both when left out. */
  readonly labels?: { readonly across: boolean; readonly down: boolean };
}

/** Where the title of the side that runs down stands above the first label. */
const TITLE_RISE = 8;

/**
 * The frame of a picture, drawn as the border of a chart: between two lines, lengths that alternate
 * from mark to mark, with the marks' labels at the left and beneath.
 */
export function Neatline(props: Props) {
  const { plot, frame, view, axes, font, labelRoom } = props;
  const { labels = { across: true, down: true } } = props;
  const left = plot.left + frame.left;
  const top = plot.top + frame.top;
  const right = left + frame.width;
  const bottom = top + frame.height;
  const x = (cells: number): number => plot.left + view.left + cells * view.scaleX;
  const y = (cells: number): number => plot.top + view.top + cells * view.scaleY;
  const titleEnd = right + BAND;
  const titleStart = titleEnd - 8 * (axes.acrossTitle.length + 4);
  return (
    <svg class="neatline" aria-hidden="true">
      <rect
        class="neatline-edge"
        x={left - BAND - 0.5}
        y={top - BAND - 0.5}
        width={frame.width + 2 * BAND + 1}
        height={frame.height + 2 * BAND + 1}
      />
      <rect
        class="neatline-edge"
        x={left - 0.5}
        y={top - 0.5}
        width={frame.width + 1}
        height={frame.height + 1}
      />
      {lengths(axes.across, x, left, right).map(([from, to]) => (
        <g key={`across ${from}`} class="neatline-length">
          <rect x={from} y={top - BAND + 2} width={to - from} height={BAND - 4} />
          <rect x={from} y={bottom + 2} width={to - from} height={BAND - 4} />
        </g>
      ))}
      {lengths(axes.down, y, top, bottom).map(([from, to]) => (
        <g key={`down ${from}`} class="neatline-length">
          <rect x={left - BAND + 2} y={from} width={BAND - 4} height={to - from} />
          <rect x={right + 2} y={from} width={BAND - 4} height={to - from} />
        </g>
      ))}
      {labels.across
        ? axes.across
            .map((tick) => ({ tick, at: labelAt(tick, x, left, right) }))
            .filter(({ at }) => at >= left - 1 && at < titleStart)
            .map(({ tick, at }) => (
              <text
                key={`across ${tick.at}`}
                x={at}
                y={bottom + BAND + 17}
                text-anchor={at < left + 14 ? "start" : "middle"}
              >
                {tick.label}
              </text>
            ))
        : null}
      {labels.down
        ? axes.down
            .map((tick) => ({ tick, at: labelAt(tick, y, top, bottom) }))
            .filter(({ at }) => at >= top - 1 && at <= bottom + 1)
            .map(({ tick, at }) => (
              <text
                key={`down ${tick.at}`}
                x={left - BAND - 7}
                y={Math.min(bottom - 2, Math.max(top + 8, at + 4))}
                text-anchor="end"
              >
                {fitted(tick.label, font, labelRoom)}
              </text>
            ))
        : null}
      {labels.across ? (
        <text class="neatline-title" x={titleEnd} y={bottom + BAND + 17} text-anchor="end">
          {axes.acrossTitle} →
        </text>
      ) : null}
      {labels.down ? (
        <text
          class="neatline-title"
          x={left - BAND - 7}
          y={top - BAND - TITLE_RISE + 2}
          text-anchor="end"
        >
          {axes.downTitle} ↓
        </text>
      ) : null}
    </svg>
  );
}

/** The filled lengths along a side, cut at the frame, from every odd mark to the next. */
function lengths(
  ticks: readonly Tick[],
  place: (cells: number) => number,
  start: number,
  stop: number,
): [number, number][] {
  const filled: [number, number][] = [];
  const [first] = ticks;
  if (first !== undefined && !first.odd) filled.push([start, place(first.at)]);
  ticks.forEach((tick, i) => {
    if (!tick.odd) return;
    const next = ticks[i + 1];
    filled.push([place(tick.at), next === undefined ? stop : place(next.at)]);
  });
  return filled
    .map(([from, to]): [number, number] => [Math.max(start, from), Math.min(stop, to)])
    .filter(([from, to]) => to > from);
}

/** A label stands at its cell's middle, as far as that is inside the frame. */
function labelAt(
  tick: Tick,
  place: (cells: number) => number,
  start: number,
  stop: number,
): number {
  const edge = place(tick.at);
  const middle = (edge + place(tick.at + 1)) / 2;
  return middle <= stop && middle >= start ? middle : edge;
}
