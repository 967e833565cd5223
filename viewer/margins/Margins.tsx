import type { ChartLayout } from "../field/chartlayout.js";
import { axisTitle } from "../frame/axes.js";
import type { Axis, Plane } from "../map/plane.js";
import { spotOf } from "../map/plane.js";
import type { Cell, ShownMap } from "../map/shownmap.js";
import type { View } from "../picture/view.js";
import { Margin } from "./Margin.js";

interface Props {
  readonly map: ShownMap;
  readonly plane: Plane;
  readonly view: View;
  readonly layout: ChartLayout;
  readonly cursor: Cell | undefined;
}

/** The margins that hang on the edges of the field: mean storage along time, and along the places. */
export function Margins({ map, plane, view, layout, cursor }: Props) {
  const { above, beside } = layout;
  const spot = cursor === undefined ? undefined : spotOf(plane, cursor);
  return (
    <svg class="margins" aria-hidden="true">
      {above === undefined ? null : (
        <>
          <Margin
            values={curveAlong(map, plane, plane.across)}
            box={above}
            scale={view.scaleX}
            start={view.left}
            upright={false}
            cursor={spot?.x}
            name={marginName(map, plane.across)}
          />
          <text
            class="margins-title"
            x={above.left + above.width}
            y={above.top + 8}
            text-anchor="end"
          >
            {marginName(map, plane.across)}, bit
          </text>
        </>
      )}
      {beside === undefined ? null : (
        <Margin
          values={curveAlong(map, plane, plane.down)}
          box={beside}
          scale={view.scaleY}
          start={view.top}
          upright={true}
          cursor={spot?.y}
          name={marginName(map, plane.down)}
        />
      )}
    </svg>
  );
}

/** The mean storage along an axis, one number a cell as it stands there. */
export function curveAlong(map: ShownMap, plane: Plane, axis: Axis): Float64Array {
  if (axis === "time") return map.alongTime;
  const { order } = plane;
  if (order === undefined) return map.alongPlaces;
  return Float64Array.from(order, (place) => map.alongPlaces[place] ?? Number.NaN);
}

function marginName(map: ShownMap, axis: Axis): string {
  const over = axis === "time" ? `${axisTitle(map, "place")}s` : "time";
  const what = map.measured === "predictive" ? "predictive information" : "storage";
  return `mean ${what} over ${over}`;
}
