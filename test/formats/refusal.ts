import { LatchmapError } from "../../src/recording/errors.js";

/** The code and the one line of the error that `work` ends in, with its full stop. */
export async function refusal(work: Promise<unknown>): Promise<string> {
  const outcome = await work.then(
    () => "it was accepted",
    (error: unknown) => error,
  );
  if (!(outcome instanceof LatchmapError)) throw new Error(`no refusal: ${String(outcome)}`);
  return `${outcome.code}: ${outcome.message.replace(/\.$/, "")}.`;
}
