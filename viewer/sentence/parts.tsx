import type { ComponentChildren } from "preact";
import type { ShownMap } from "../map/shownmap.js";
import type { Session } from "../page/session.js";

/** What every slip about a map is given. */
export interface SlipProps {
  readonly session: Session;
  readonly map: ShownMap;
  readonly close: () => void;
}

interface ChoiceProps {
  readonly taken: boolean;
  readonly onTake: () => void;
  readonly children: ComponentChildren;
}

/** One of a few ways, on a line of its own; the present one is marked. */
export function Choice({ taken, onTake, children }: ChoiceProps) {
  return (
    <button type="button" class="choice" aria-pressed={taken} onClick={onTake}>
      {children}
    </button>
  );
}

/** Why a setting is what it is, where it was chosen from the data. */
export function Reason({ map, about }: { readonly map: ShownMap; readonly about: RegExp }) {
  const reason = map.chosen.find((sentence) => about.test(sentence));
  return reason === undefined ? null : <p class="slip-note">Chosen from the data: {reason}.</p>;
}

/** How to change what was set when a result was made. */
export function SetBefore({ option }: { readonly option: string }) {
  return (
    <p class="slip-note">
      Set when the map was made. To change it, map the recording again with <code>{option}</code>,
      or open the recording here.
    </p>
  );
}
