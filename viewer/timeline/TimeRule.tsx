import { useSignalEffect } from "@preact/signals";
import { axisTitle } from "../frame/axes.js";
import { type Bin, binsOf, rangeWithZero, stepArea, stepPath } from "../margins/bins.js";
import type { Session } from "../page/session.js";
import type { Box } from "../picture/view.js";
import { timeText } from "../readout/words.js";
import type { SectionStates } from "../sections/sectionstate.js";
import "./timerule.css";

const STEPS_A_SECOND = 12;
/** For those who asked for less motion. */
const CALM_STEPS_A_SECOND = 2;

const WIDTH = 1000;
const HEIGHT = 100;

interface Props {
  readonly session: Session;
  readonly sections: SectionStates;
  /** Where it stands in the chart, under the section whose time it shares; below the chart when left out. */
  readonly corner?: Box;
}

/** The time of a grid's frame: a rule to slide along, the mean storage over it, and play. */
export function TimeRule({ session, sections, corner }: Props) {
  usePlaying(session);
  const map = session.map.value;
  if (map === undefined || map.layout.kind !== "grid") return null;
  const step = session.step.value;
  const last = map.timeSteps - 1;
  const [from, to] = sections.stretch.value;
  const curve = curveOf(map.alongTime, from, to);
  const placed =
    corner === undefined
      ? {}
      : {
          style: {
            left: `${corner.left}px`,
            top: `${corner.top}px`,
            width: `${corner.width}px`,
            height: `${corner.height}px`,
          },
        };
  return (
    <div class={`timerule${corner === undefined ? "" : " cornered"}`} {...placed}>
      <button
        type="button"
        class="deed"
        aria-pressed={session.playing.value}
        onClick={() => {
          session.playing.value = !session.playing.value;
        }}
      >
        {session.playing.value ? "Pause" : "Play"}
      </button>
      <div class="timerule-track">
        <svg viewBox={`0 0 ${WIDTH} ${HEIGHT}`} preserveAspectRatio="none" aria-hidden="true">
          <title>Mean local storage along time</title>
          <path d={curve.band} class="timerule-band" />
          <path d={`M0 ${curve.zero}H${WIDTH}`} class="timerule-zero" />
          <path d={curve.line} class="timerule-curve" />
        </svg>
        <input
          type="range"
          min={Math.ceil(from)}
          max={Math.min(last, Math.floor(to))}
          value={step}
          aria-label={axisTitle(map, "time")}
          aria-valuetext={timeText(map, step)}
          onInput={(event) => {
            session.playing.value = false;
            session.showStep(event.currentTarget.valueAsNumber);
          }}
        />
      </div>
      <p class="timerule-now">
        <span>{axisTitle(map, "time")}</span> {timeText(map, step)}{" "}
        <span>of {timeText(map, last)}</span>
      </p>
      {corner === undefined ? null : <p class="timerule-title">mean storage over cells, bit</p>}
    </div>
  );
}

/** The mean storage along a stretch of time, with its range where steps are merged. */
function curveOf(
  alongTime: Float64Array,
  from: number,
  to: number,
): { band: string; line: string; zero: number } {
  const [least, greatest] = rangeWithZero(alongTime);
  const bins = binsOf(alongTime, from, to, WIDTH / 2);
  const along = (step: number): number =>
    Math.min(WIDTH, Math.max(0, (WIDTH * (step - from)) / (to - from)));
  const up = (bits: number): number =>
    HEIGHT - (HEIGHT * (bits - least)) / Math.max(greatest - least, Number.MIN_VALUE);
  const low = (bin: Bin): number => bin.least;
  const high = (bin: Bin): number => bin.greatest;
  return {
    band: stepArea(bins, low, high, along, up, false),
    line: stepPath(bins, (bin) => bin.mean, along, up, false),
    zero: up(0),
  };
}

/** Brings the next frame so many times a second; at the end it starts again. */
function usePlaying(session: Session): void {
  useSignalEffect(() => {
    if (!session.playing.value) return;
    const calm = matchMedia("(prefers-reduced-motion: reduce)").matches;
    const pace = calm ? CALM_STEPS_A_SECOND : STEPS_A_SECOND;
    let before = performance.now();
    let frame = requestAnimationFrame(function turn(now) {
      frame = requestAnimationFrame(turn);
      const map = session.map.peek();
      const steps = Math.floor(((now - before) / 1000) * pace);
      if (steps < 1 || map === undefined) return;
      before += (steps * 1000) / pace;
      session.showStep((session.step.peek() + steps) % map.timeSteps);
    });
    return () => cancelAnimationFrame(frame);
  });
}
