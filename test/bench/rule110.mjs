// The recording of the counting benchmarks: rule 110, 10,000 cells × 1,000 steps, seeded.
export const CELLS = 10_000;
export const STEPS = 1_000;
export const HISTORY = 16;

export function rule110() {
  const states = new Uint8Array(CELLS * STEPS);
  let x = 110;
  for (let cell = 0; cell < CELLS; cell++) {
    x = (Math.imul(1664525, x) + 1013904223) >>> 0;
    states[cell] = x >>> 31;
  }
  for (let step = 1; step < STEPS; step++) {
    const old = (step - 1) * CELLS;
    for (let cell = 0; cell < CELLS; cell++) {
      const left = states[old + (cell === 0 ? CELLS - 1 : cell - 1)];
      const right = states[old + (cell === CELLS - 1 ? 0 : cell + 1)];
      states[step * CELLS + cell] = (110 >> (4 * left + 2 * states[old + cell] + right)) & 1;
    }
  }
  return states;
}
