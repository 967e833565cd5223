import type { ComponentChildren } from "preact";
import type { SlipName, Slips } from "./slips.js";

interface Props {
  readonly opens: SlipName;
  readonly slips: Slips;
  readonly children: ComponentChildren;
}

/** A word of the sentence that is a control: it opens a slip beneath itself. */
export function Word({ opens, slips, children }: Props) {
  const open = slips.value?.name === opens;
  return (
    <button
      type="button"
      class="word"
      aria-haspopup="dialog"
      aria-expanded={open}
      onClick={(event) => {
        slips.value = open ? undefined : { name: opens, word: event.currentTarget };
      }}
    >
      {children}
    </button>
  );
}
