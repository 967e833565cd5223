import { effect, type ReadonlySignal, type Signal, signal } from "@preact/signals";
import { gapHatch, paperColour, type Rgba, type Scheme } from "../../src/report/palette.js";

const KEPT_AS = "latchmap-scheme";

/** The colour scheme of the page: the system's, until the reader chooses. */
export interface SchemeChoice {
  readonly scheme: ReadonlySignal<Scheme>;
  turn(): void;
}

/** Follows the system's scheme and the reader's choice, and gives the style sheet the palette's own colours. */
export function followScheme(root: HTMLElement): SchemeChoice {
  const system = matchMedia("(prefers-color-scheme: dark)");
  const kept = remembered();
  const scheme: Signal<Scheme> = signal(kept ?? (system.matches ? "dark" : "light"));
  let chosen = kept !== undefined;
  system.addEventListener("change", () => {
    if (!chosen) scheme.value = system.matches ? "dark" : "light";
  });
  effect(() => {
    const [ground, line] = gapHatch(scheme.value);
    root.dataset.scheme = scheme.value;
    root.style.colorScheme = scheme.value;
    root.style.setProperty("--sheet", cssColour(paperColour(scheme.value)));
    root.style.setProperty("--hatch-ground", cssColour(ground));
    root.style.setProperty("--hatch-line", cssColour(line));
  });
  return {
    scheme,
    turn: () => {
      chosen = true;
      scheme.value = scheme.value === "light" ? "dark" : "light";
      remember(scheme.value);
    },
  };
}

/** A colour of the palette as CSS writes it. */
export function cssColour([red, green, blue]: Rgba): string {
  return `rgb(${red} ${green} ${blue})`;
}

function remembered(): Scheme | undefined {
  try {
    const kept = localStorage.getItem(KEPT_AS);
    return kept === "light" || kept === "dark" ? kept : undefined;
  } catch {
    return undefined;
  }
}

function remember(scheme: Scheme): void {
  try {
    localStorage.setItem(KEPT_AS, scheme);
  } catch {
    // A browser that keeps nothing asks again next time.
  }
}
