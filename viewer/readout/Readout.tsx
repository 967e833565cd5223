import { useSignal, useSignalEffect } from "@preact/signals";
import type { FieldState } from "../field/fieldstate.js";
import type { Session } from "../page/session.js";
import "./readout.css";
import { cellSentence, describeCell, describeField } from "./words.js";

const PAUSE_BEFORE_SPEAKING = 350;

interface Props {
  readonly session: Session;
  readonly field: FieldState;
}

/** What stands in the cell under the cursor. */
export function Readout({ session, field }: Props) {
  const map = session.map.value;
  const shown = session.field.value;
  const facts = session.facts.value;
  const cursor = session.cursor.value;
  if (map === undefined || shown === undefined) return <div class="readout" />;
  if (cursor === undefined || facts === undefined) {
    return (
      <div class="readout" aria-busy={cursor !== undefined || field.pointer.seeking.value}>
        <p class="readout-hint">
          Point at the field to read a cell, or move there with the arrow keys.
        </p>
      </div>
    );
  }
  const { cell, numbers } = facts;
  const late = cell.step !== cursor.step || cell.place !== cursor.place;
  const words = describeCell(map, cell, numbers);
  const other = describeField(map, shown, numbers);
  const bits = numbers.local_storage ?? Number.NaN;
  const sign = bits < 0 ? "misled" : bits > 0 ? "told" : "none";
  return (
    <div class="readout" aria-busy={late || field.pointer.seeking.value}>
      <dl>
        <Fact title={words.timeTitle} text={words.time} name="time" />
        <Fact title={words.placeTitle} text={words.place} name="place" />
        <Fact title="value" text={words.value} name="value" />
        <Fact title={words.storageTitle} text={words.storage} name={`storage ${sign}`} />
        {other === undefined ? null : <Fact title={other.title} text={other.text} name="other" />}
      </dl>
      <p class="readout-line">
        <span class="readout-meaning">{words.meaning}</span>{" "}
        <button
          type="button"
          class="word readout-why"
          aria-expanded={session.held.value}
          onClick={() => {
            session.held.value = !session.held.value;
          }}
        >
          {session.held.value ? "let go" : "why?"}
        </button>
      </p>
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
    const facts = session.facts.value;
    if (map === undefined || facts === undefined) return;
    const timer = setTimeout(() => {
      said.value = cellSentence(describeCell(map, facts.cell, facts.numbers));
    }, PAUSE_BEFORE_SPEAKING);
    return () => clearTimeout(timer);
  });
  return (
    <p class="unseen" aria-live="polite">
      {said}
    </p>
  );
}
