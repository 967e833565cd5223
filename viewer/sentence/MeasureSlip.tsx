import type { Measure } from "../page/session.js";
import { Choice, type SlipProps } from "./parts.js";

const MEASURES: readonly [Measure, string, string][] = [
  ["storage", "Local storage", "how much its own past tells about each value, in bits"],
  ["values", "Values", "the recording itself"],
];

/** Switches what the colours stand for. */
export function MeasureSlip({ session, close }: SlipProps) {
  return (
    <>
      {MEASURES.map(([measure, name, meaning]) => (
        <Choice
          key={measure}
          taken={session.measure.value === measure}
          onTake={() => {
            session.measure.value = measure;
            close();
          }}
        >
          <strong>{name}</strong> {meaning}
        </Choice>
      ))}
    </>
  );
}
