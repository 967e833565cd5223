import { samples } from "../../samples/catalogue.js";
import type { Session } from "../page/session.js";

interface Props {
  readonly session: Session;
  readonly onChosen?: () => void;
}

/** The demo recordings, a sentence each. */
export function SampleList({ session, onChosen }: Props) {
  return (
    <ul class="samples">
      {samples.map((sample) => (
        <li key={sample.name}>
          <button
            type="button"
            class="word"
            onClick={() => {
              onChosen?.();
              session.openSample(sample.name);
            }}
          >
            {sample.name}
          </button>{" "}
          <span>{sample.sentence}</span>
        </li>
      ))}
    </ul>
  );
}
