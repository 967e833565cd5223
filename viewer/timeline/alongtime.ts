const MOST_POINTS = 600;

/**
 * A curve over time as an SVG path in a box, with the height of zero. Where there are more steps than
 * points, a point stands for several and shows the one furthest from zero; NaN breaks the curve.
 *
 * @param values mean local storage in bits, shape [time]
 */
export function alongTimePath(
  values: Float64Array,
  width: number,
  height: number,
): { readonly curve: string; readonly zero: number } {
  const each = Math.max(1, Math.ceil(values.length / MOST_POINTS));
  const points = Array.from({ length: Math.ceil(values.length / each) }, (_, i) =>
    furthest(values.subarray(i * each, (i + 1) * each)),
  );
  const known = points.filter((point) => !Number.isNaN(point));
  const least = Math.min(0, ...known);
  const greatest = Math.max(0, ...known, least + 1e-12);
  const y = (bits: number): number =>
    Math.round(10 * (height - ((bits - least) / (greatest - least)) * height)) / 10;
  let curve = "";
  let drawing = false;
  points.forEach((point, i) => {
    if (Number.isNaN(point)) {
      drawing = false;
      return;
    }
    const x = Math.round((10 * width * i) / Math.max(1, points.length - 1)) / 10;
    curve += `${drawing ? "L" : "M"}${x} ${y(point)}`;
    drawing = true;
  });
  return { curve, zero: y(0) };
}

function furthest(values: Float64Array): number {
  let found = Number.NaN;
  for (const value of values) {
    if (Number.isNaN(value)) continue;
    if (Number.isNaN(found) || Math.abs(value) > Math.abs(found)) found = value;
  }
  return found;
}
