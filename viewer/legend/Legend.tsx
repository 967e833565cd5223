import { useEffect, useRef } from "preact/hooks";
import type { FieldState } from "../field/fieldstate.js";
import { type Ink, scaleOf } from "../field/ink.js";
import type { ShownMap } from "../map/shownmap.js";
import type { Session } from "../page/session.js";
import { numberText } from "../readout/words.js";
import "./legend.css";

interface Props {
  readonly session: Session;
  readonly field: FieldState;
}

/** What the colours mean, with the bits at their ends. */
export function Legend({ session, field }: Props) {
  const map = session.map.value;
  const ink = field.ink.value;
  if (map === undefined || ink === undefined) return null;
  return (
    <section class="legend" aria-label="What the colours mean">
      <div class="legend-scale">
        <Strip ink={ink} />
        {session.measure.value === "storage" ? (
          <StorageMarks scale={scaleOf(map, session.reach.value)} />
        ) : (
          <ValueMarks map={map} />
        )}
      </div>
      <div class="legend-notes">
        <span class="legend-gap">
          <i class="hatched" aria-hidden="true" />
          {session.measure.value === "storage" ? "no storage here" : "a gap"}
        </span>
        {session.measure.value === "storage" ? <ReachWord session={session} map={map} /> : null}
        {field.merged.value === 1 ? null : (
          <span>
            a pixel shows the strongest of {field.merged.value.toLocaleString("en")} cells
          </span>
        )}
      </div>
    </section>
  );
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

function StorageMarks({ scale }: { readonly scale: number }) {
  return (
    <p class="legend-marks">
      <span>
        −{numberText(scale)} <em>past misled</em>
      </span>
      <span>0</span>
      <span>
        <em>past told</em> +{numberText(scale)} bit
      </span>
    </p>
  );
}

function ValueMarks({ map }: { readonly map: ShownMap }) {
  const { least, greatest } = map.spread;
  return (
    <p class="legend-marks">
      <span>{numberText(least)}</span>
      <em>values of the recording</em>
      <span>{numberText(greatest)}</span>
    </p>
  );
}

/** Where the colours end; a word that switches it, where there is a choice. */
function ReachWord({ session, map }: { readonly session: Session; readonly map: ShownMap }) {
  const { usual, largest, beyond } = map.strengths;
  if (largest <= usual) return <span>no cell lies beyond</span>;
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
          ? `stretch to ±${numberText(Number(largest.toPrecision(3)))}`
          : `end at ±${numberText(usual)}`}
      </button>
    </span>
  );
}

function percentText(share: number): string {
  const percent = 100 * share;
  if (percent < 0.01) return "fewer than 0.01 %";
  return `${percent < 0.1 ? percent.toFixed(2) : percent.toFixed(1)} %`;
}
