import type { ComponentChildren } from "preact";
import { useLayoutEffect, useRef } from "preact/hooks";
import type { Slips } from "./slips.js";

interface Props {
  readonly slips: Slips;
  readonly label: string;
  readonly children: ComponentChildren;
}

/** A slip of paper under the word that opened it. Escape or a click beside it puts it away. */
export function Slip({ slips, label, children }: Props) {
  const slip = useRef<HTMLDivElement>(null);
  const word = slips.value?.word;
  useLayoutEffect(() => {
    const element = slip.current;
    if (element === null || word === undefined) return;
    element.showPopover();
    const { left, bottom } = word.getBoundingClientRect();
    const most = document.documentElement.clientWidth - element.offsetWidth - 12;
    element.style.left = `${Math.max(12, Math.min(most, left - 14))}px`;
    element.style.top = `${bottom + 8}px`;
    (element.querySelector<HTMLElement>("input:not(.unseen), button") ?? element).focus();
    const closed = (event: Event): void => {
      if (!(event instanceof ToggleEvent) || event.newState !== "closed") return;
      if (slips.value?.word === word) slips.value = undefined;
    };
    element.addEventListener("toggle", closed);
    return () => {
      element.removeEventListener("toggle", closed);
      if (element.contains(document.activeElement) || document.activeElement === document.body) {
        word.focus();
      }
    };
  }, [word, slips]);
  return (
    <div class="slip" popover="auto" role="dialog" aria-label={label} tabIndex={-1} ref={slip}>
      {children}
    </div>
  );
}
