/**
 * A question of which only the latest matters: while one is under way, the next one waits, and takes
 * the place of any that waited before. A question that fails is forgotten; what it is about will say so.
 */
export function latestOnly<Words extends readonly unknown[]>(
  ask: (...words: Words) => Promise<void>,
): (...words: Words) => void {
  let busy = false;
  let waiting: Words | undefined;
  const next = async (words: Words): Promise<void> => {
    busy = true;
    try {
      await ask(...words);
    } catch {
      // The picture of the same cells fails as well, and is told.
    }
    busy = false;
    const after = waiting;
    waiting = undefined;
    if (after !== undefined) next(after);
  };
  return (...words) => {
    if (busy) waiting = words;
    else next(words);
  };
}
