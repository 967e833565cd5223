import type { Session, Stage } from "../page/session.js";

interface Props {
  readonly session: Session;
  readonly stage: Extract<Stage, { kind: "busy" }>;
}

const STAGES: Readonly<Record<string, string>> = {
  opening: "Opening it",
  reading: "Reading every value",
  states: "Finding the states",
  counting: "Counting what follows each past",
  mapping: "Scoring every cell",
};

/** How far the work is, and the way to stop it. */
export function Busy({ session, stage }: Props) {
  const percent = Math.round(100 * stage.share);
  const doing = STAGES[stage.name] ?? stage.name;
  return (
    <div class="cartouche late" role="status">
      <p class="cartouche-lead">{stage.title}</p>
      <p class="busy-stage">{doing} …</p>
      <div
        class="scalebar"
        role="progressbar"
        aria-label={doing}
        aria-valuemin={0}
        aria-valuemax={100}
        aria-valuenow={percent}
      >
        <div class="scalebar-done" style={{ width: `${percent}%` }} />
      </div>
      <p>
        <button type="button" class="deed" onClick={session.cancel}>
          Cancel
        </button>
      </p>
    </div>
  );
}
