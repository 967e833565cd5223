import { ChooseFile } from "../opening/ChooseFile.js";
import { SampleList } from "../opening/SampleList.js";
import type { SlipProps } from "./parts.js";

/** How the recording was read, and the ways to another one. */
export function TitleSlip({ session, map, close }: SlipProps) {
  return (
    <>
      {map.notes.length === 0 ? null : (
        <ul class="slip-list">
          {map.notes.map((note) => (
            <li key={note}>{note}</li>
          ))}
        </ul>
      )}
      <p>
        <ChooseFile session={session} onChosen={close}>
          Open another recording
        </ChooseFile>
      </p>
      <p class="slip-note">Or drop a file anywhere, or lay out a sample:</p>
      <SampleList session={session} onChosen={close} />
    </>
  );
}
