import { useEffect, useRef } from "preact/hooks";
import type { FieldState } from "../field/fieldstate.js";
import { fieldWords } from "../map/fieldwords.js";
import type { ShownField, ShownMap } from "../map/shownmap.js";
import type { Session } from "../page/session.js";
import type { Ink } from "../picture/ink.js";
import { numberText } from "../readout/words.js";
import { hasUsualEnd, largestOf, scaleOf } from "../shades/scale.js";
import "./legend.css";

interface Props {
  readonly session: Session;
  readonly field: FieldState;
}

/** What the colours mean, with the numbers at their ends. */
export function Legend({ session, field }: Props) {
  const map = session.map.value;
  const shown = session.field.value;
  const ink = field.ink.value;
  if (map === undefined || shown === undefined || ink === undefined) return null;
  const marks = legendMarks(map, shown, session);
  return (
    <section class="legend" aria-label="What the colours mean">
      <div class="legend-scale">
        <Strip ink={ink} />
        <p class="legend-marks">
          <span>
            {marks.low} <em>{marks.lowWord}</em>
          </span>
          <span>{marks.middle}</span>
          <span>
            <em>{marks.highWord}</em> {marks.high}
          </span>
        </p>
      </div>
      <div class="legend-notes">
        <span class="legend-gap">
          <i class="hatched" aria-hidden="true" />
          {shown.name === "values" ? "a gap" : "no value here"}
        </span>
        {hasUsualEnd(shown) ? <ReachWord session={session} field={shown} /> : null}
        {field.merged.value === 1 ? null : (
          <span>
            a pixel shows the strongest of {field.merged.value.toLocaleString("en")} cells
          </span>
        )}
      </div>
    </section>
  );
}

/** What stands under the colours of a field. */
export interface LegendMarks {
  readonly low: string;
  readonly lowWord: string;
  readonly middle: string;
  readonly highWord: string;
  readonly high: string;
}

/** The marks of a field's legend. */
export function legendMarks(map: ShownMap, field: ShownField, session: Session): LegendMarks {
  const scale = scaleOf(field, session.reach.value);
  const units = field.units === undefined ? "" : ` ${field.units}`;
  if (scale.kind === "signed") {
    const end = numberText(Number(scale.end.toPrecision(3)));
    const words =
      field.name === "local_storage" || field.name === "evidence_mask"
        ? { lowWord: "past misled", highWord: "past told" }
        : { lowWord: "", highWord: "" };
    return { low: `−${end}`, middle: "0", high: `+${end}${units}`, ...words };
  }
  return {
    low: numberText(scale.from),
    lowWord: "",
    middle:
      field.name === "values"
        ? "values of the recording"
        : fieldWords(field, map.measured).title.toLowerCase(),
    highWord: "",
    high: `${numberText(Number(scale.to.toPrecision(4)))}${units}`,
  };
}

/** The colours in a row, taken from the very table that colours the field. */
function Strip({ ink }: { readonly ink: Ink }) {
  const canvas = useRef<HTMLCanvasElement>(null);
  const { colours } = ink;
  useEffect(() => {
    const context = canvas.current?.getContext("2d");
    if (context === null || context === undefined) return;
    const picture = context.createImageData(colours.length, 1);
    new Uint32Array(picture.data.buffer).set(colours);
    context.putImageData(picture, 0, 0);
  }, [colours]);
  return <canvas class="legend-strip" ref={canvas} width={colours.length} height={1} />;
}

/** Where the colours end; a word that switches it. */
function ReachWord({ session, field }: { readonly session: Session; readonly field: ShownField }) {
  const { usual, beyond } = field.spread;
  const sign = scaleOf(field, "usual").kind === "signed" ? "±" : "";
  const atUsual = session.reach.value === "usual";
  return (
    <span>
      {atUsual ? `${percentText(beyond)} of cells lie beyond, ` : "no cell lies beyond, "}
      <button
        type="button"
        class="word"
        onClick={() => {
          session.reach.value = atUsual ? "largest" : "usual";
        }}
      >
        {atUsual
          ? `stretch to ${sign}${numberText(Number(largestOf(field).toPrecision(3)))}`
          : `end at ${sign}${numberText(usual)}`}
      </button>
    </span>
  );
}

function percentText(share: number): string {
  const percent = 100 * share;
  if (percent < 0.01) return "fewer than 0.01 %";
  return `${percent < 0.1 ? percent.toFixed(2) : percent.toFixed(1)} %`;
}
