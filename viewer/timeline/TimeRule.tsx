import { useSignalEffect } from "@preact/signals";
import { axisTitle } from "../frame/axes.js";
import type { Session } from "../page/session.js";
import { timeText } from "../readout/words.js";
import { alongTimePath } from "./alongtime.js";
import "./timerule.css";

const STEPS_A_SECOND = 12;

/** The time of a grid's frame: a rule to slide along, the mean storage over it, and play. */
export function TimeRule({ session }: { readonly session: Session }) {
  usePlaying(session);
  const map = session.map.value;
  if (map === undefined || map.layout.kind !== "grid") return null;
  const step = session.step.value;
  const last = map.timeSteps - 1;
  const path = alongTimePath(map.alongTime, 1000, 100);
  return (
    <div class="timerule">
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
        <svg viewBox="0 0 1000 100" preserveAspectRatio="none" aria-hidden="true">
          <title>Mean local storage along time</title>
          <path d={`M0 ${path.zero}H1000`} class="timerule-zero" />
          <path d={path.curve} class="timerule-curve" />
        </svg>
        <input
          type="range"
          min={0}
          max={last}
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
    </div>
  );
}

/** Brings the next frame so many times a second; at the end it starts again. */
function usePlaying(session: Session): void {
  useSignalEffect(() => {
    if (!session.playing.value) return;
    let before = performance.now();
    let frame = requestAnimationFrame(function turn(now) {
      frame = requestAnimationFrame(turn);
      const map = session.map.peek();
      const steps = Math.floor(((now - before) / 1000) * STEPS_A_SECOND);
      if (steps < 1 || map === undefined) return;
      before += (steps * 1000) / STEPS_A_SECOND;
      session.showStep((session.step.peek() + steps) % map.timeSteps);
    });
    return () => cancelAnimationFrame(frame);
  });
}
