import { useSignal, useSignalEffect } from "@preact/signals";
import type { Session } from "../page/session.js";
import "./readout.css";
import { cellSentence, describeCell } from "./words.js";

const PAUSE_BEFORE_SPEAKING = 350;

/** What stands in the cell under the cursor. */
export function Readout({ session }: { readonly session: Session }) {
  const map = session.map.value;
  const cursor = session.cursor.value;
  if (map === undefined) return <div class="readout" />;
  if (cursor === undefined) {
    return (
      <div class="readout">
        <p class="readout-hint">
          Point at the field to read a cell, or move there with the arrow keys.
        </p>
      </div>
    );
  }
  const words = describeCell(map, cursor);
  const bits = map.storage[cursor.step * map.summary.places + cursor.place] ?? Number.NaN;
  const sign = bits < 0 ? "misled" : bits > 0 ? "told" : "none";
  return (
    <div class="readout">
      <dl>
        <Fact title={words.timeTitle} text={words.time} name="time" />
        <Fact title={words.placeTitle} text={words.place} name="place" />
        <Fact title="value" text={words.value} name="value" />
        <Fact title={words.storageTitle} text={words.storage} name={`storage ${sign}`} />
      </dl>
      <p class="readout-meaning">{words.meaning}</p>
      <Spoken session={session} />
    </div>
  );
}

function Fact({ title, text, name }: { title: string; text: string; name: string }) {
  return (
    <div class={`fact ${name}`}>
      <dt>{title}</dt>
      <dd>{text}</dd>
    </div>
  );
}

/** Says the cell once the cursor rests, so that a screen reader is not flooded. */
function Spoken({ session }: { readonly session: Session }) {
  const said = useSignal("");
  useSignalEffect(() => {
    const map = session.map.value;
    const cursor = session.cursor.value;
    if (map === undefined || cursor === undefined) return;
    const timer = setTimeout(() => {
      said.value = cellSentence(describeCell(map, cursor));
    }, PAUSE_BEFORE_SPEAKING);
    return () => clearTimeout(timer);
  });
  return (
    <p class="unseen" aria-live="polite">
      {said}
    </p>
  );
}
