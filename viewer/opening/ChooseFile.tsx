import type { ComponentChildren } from "preact";
import { useRef } from "preact/hooks";
import type { Session } from "../page/session.js";

interface Props {
  readonly session: Session;
  readonly onChosen?: () => void;
  readonly children: ComponentChildren;
}

/** A button that asks the system for a file and maps it. */
export function ChooseFile({ session, onChosen, children }: Props) {
  const input = useRef<HTMLInputElement>(null);
  return (
    <>
      <button type="button" class="deed" onClick={() => input.current?.click()}>
        {children}
      </button>
      <input
        class="unseen"
        type="file"
        accept=".npy,.csv,.tsv,.txt"
        aria-label="A recording"
        tabIndex={-1}
        ref={input}
        onChange={(event) => {
          const [file] = event.currentTarget.files ?? [];
          event.currentTarget.value = "";
          if (file === undefined) return;
          onChosen?.();
          session.openFile(file);
        }}
      />
    </>
  );
}
