import type { Box, Size } from "../picture/view.js";

/** The width of the band of black and white lengths around a chart, in CSS pixels. */
export const BAND = 7;

const TITLE_ROOM = 20;
const LABEL_ROOM = 22;
/** Between the frames of two pictures that lie side by side. */
const APART = 2 * BAND + 8;

/** Where the parts of a chart lie in its room, frames and labels left out. */
export interface ChartLayout {
  readonly plot: Box;
  /** The margins on its edges, where there is room for them. */
  readonly above?: Box;
  readonly beside?: Box;
  /** On a grid: rows over time at the right, columns over time beneath, like the sides of a box laid flat. */
  readonly rowSection?: Box;
  readonly columnSection?: Box;
  /** On a grid: the room under the one and beside the other, where the time may stand. */
  readonly corner?: Box;
}

/**
 * Lays out the chart of a line or a network: the plot with margins above and at the right.
 *
 * @param labelRoom CSS pixels that labels at the left take
 */
export function layOutRaster({ width, height }: Size, labelRoom: number): ChartLayout {
  const above = height < 330 ? 0 : Math.round(clamp(0.1 * height, 34, 84));
  const beside = width < 620 ? 0 : Math.round(clamp(0.07 * width, 52, 150));
  const left = labelRoom + 8 + BAND;
  const top = (above === 0 ? TITLE_ROOM : above + 20) + BAND;
  const plot = {
    left,
    top,
    width: room(width - left - BAND - 1 - (beside === 0 ? 0 : beside + 9)),
    height: room(height - top - BAND - LABEL_ROOM),
  };
  return {
    plot,
    ...(above === 0 ? {} : { above: { left, top: 4, width: plot.width, height: above } }),
    ...(beside === 0
      ? {}
      : {
          beside: {
            left: left + plot.width + BAND + 9,
            top,
            width: beside,
            height: plot.height,
          },
        }),
  };
}

/** Lays out the chart of a grid: the frame with square cells, and both sections through the cursor. */
export function layOutGrid(
  { width, height }: Size,
  labelRoom: number,
  grid: { readonly rows: number; readonly columns: number },
): ChartLayout {
  const left = labelRoom + 8 + BAND;
  const top = TITLE_ROOM + BAND;
  const acrossAll = room(width - left - BAND - 1);
  const downAll = room(height - top - BAND - LABEL_ROOM);
  const rowDepth = clamp(0.3 * acrossAll, 64, 900);
  const columnDepth = clamp(0.24 * downAll, 44, 420);
  const scale = Math.max(
    0,
    Math.min(
      (acrossAll - APART - rowDepth) / grid.columns,
      (downAll - APART - columnDepth) / grid.rows,
    ),
  );
  const plot = {
    left,
    top,
    width: Math.floor(grid.columns * scale),
    height: Math.floor(grid.rows * scale),
  };
  const rowSection = {
    left: left + plot.width + APART,
    top,
    width: room(acrossAll - plot.width - APART),
    height: plot.height,
  };
  const columnSection = {
    left,
    top: top + plot.height + APART,
    width: plot.width,
    height: room(downAll - plot.height - APART),
  };
  const corner = {
    left: rowSection.left,
    top: columnSection.top + LABEL_ROOM,
    width: rowSection.width,
    height: room(columnSection.height - BAND),
  };
  const roomy = corner.width >= 360 && corner.height >= 84;
  return { plot, rowSection, columnSection, ...(roomy ? { corner } : {}) };
}

function room(length: number): number {
  return Math.max(0, Math.floor(length));
}

function clamp(length: number, least: number, most: number): number {
  return Math.min(most, Math.max(least, length));
}
