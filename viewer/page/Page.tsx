import { useMemo } from "preact/hooks";
import { Field } from "../field/Field.js";
import { fieldState } from "../field/fieldstate.js";
import { Legend } from "../legend/Legend.js";
import { Opening } from "../opening/Opening.js";
import { Readout } from "../readout/Readout.js";
import { sectionStates } from "../sections/sectionstate.js";
import { Sentence } from "../sentence/Sentence.js";
import { SlipContent } from "../sentence/SlipContent.js";
import { makeSlips } from "../sentence/slips.js";
import { Word } from "../sentence/Word.js";
import { TimeRule } from "../timeline/TimeRule.js";
import "./page.css";
import type { SchemeChoice } from "./scheme.js";
import type { Session } from "./session.js";

interface Props {
  readonly session: Session;
  readonly choice: SchemeChoice;
}

/** The sheet on the table: the sentence, the field, and what is printed in its margins. */
export function Page({ session, choice }: Props) {
  const field = useMemo(() => fieldState(session, choice.scheme), [session, choice]);
  const sections = useMemo(() => sectionStates(session, field), [session, field]);
  const slips = useMemo(makeSlips, []);
  const hasMap = session.map.value !== undefined;
  return (
    <div class={`sheet${hasMap ? "" : " blank"}`}>
      <header class="top">
        <Sentence session={session} slips={slips} />
        <p class="aside">
          <button type="button" class="word" onClick={choice.turn}>
            {choice.scheme.value === "light" ? "dark sheet" : "light sheet"}
          </button>
          {hasMap ? (
            <Word opens="keys" slips={slips}>
              keys
            </Word>
          ) : null}
        </p>
      </header>
      {hasMap ? (
        <main class="chart">
          <Field session={session} field={field} sections={sections} />
          {field.layout.value?.corner === undefined ? (
            <TimeRule session={session} sections={sections} />
          ) : null}
          <footer class="margin">
            <Readout session={session} field={field} />
            <Legend session={session} field={field} />
          </footer>
        </main>
      ) : null}
      <Opening session={session} scheme={choice.scheme.value} />
      <SlipContent session={session} slips={slips} />
    </div>
  );
}
