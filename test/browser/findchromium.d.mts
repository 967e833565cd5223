/** The path of a Chromium or Chrome on this machine, undefined where there is none. */
export function findChromium(): string | undefined;
