import { useSignal } from "@preact/signals";
import { useEffect, useRef } from "preact/hooks";
import type { ErrorFacts } from "../../src/recording/errors.js";
import { upperFirst } from "../map/fieldwords.js";
import type { Own, Session, Stage } from "../page/session.js";
import { ChooseFile } from "./ChooseFile.js";
import { onThisPage, whereText } from "./failurewords.js";

interface Props {
  readonly session: Session;
  readonly stage: Extract<Stage, { kind: "failed" }>;
}

/** What was wrong, where, and what to do about it. */
export function Failed({ session, stage }: Props) {
  const { facts, title, asked } = stage;
  const heading = useRef<HTMLHeadingElement>(null);
  useEffect(() => heading.current?.focus(), []);
  const where = whereText(facts.where, title);
  const hint = onThisPage(facts, session.map.value !== undefined);
  return (
    <div class="cartouche" role="alert">
      <h2 tabIndex={-1} ref={heading}>
        {title} could not be {stage.deed}
      </h2>
      <p class="failed-what">
        {where === "" ? upperFirst(facts.what) : `${where}: ${facts.what}`}.
      </p>
      <p>{facts.remedy}.</p>
      {hint === undefined ? null : <p>{hint}</p>}
      {asked !== undefined && facts.code === "not-a-number" ? (
        <GapWord session={session} facts={facts} asked={asked} />
      ) : null}
      <p class="failed-deeds">
        {session.map.value === undefined ? null : (
          <button type="button" class="deed" onClick={session.dismiss}>
            Back to the field
          </button>
        )}
        <ChooseFile session={session}>Choose another file</ChooseFile>
        {session.map.value === undefined ? (
          <button type="button" class="deed plain" onClick={session.dismiss}>
            Start over
          </button>
        ) : null}
      </p>
    </div>
  );
}

interface GapProps {
  readonly session: Session;
  readonly facts: ErrorFacts;
  readonly asked: Own;
}

/** A table that marks gaps with a word can be read at once, when the word is named. */
function GapWord({ session, facts, asked }: GapProps) {
  const word = useSignal(/^"(.*)" is not/.exec(facts.what)?.[1] ?? "");
  return (
    <form
      class="slip-form"
      onSubmit={(event) => {
        event.preventDefault();
        session.tryAgain(asked, { ...asked.wish, gap: word.value });
      }}
    >
      <label>
        Gaps are written as
        <input
          type="text"
          size={8}
          required
          value={word.value}
          onInput={(event) => {
            word.value = event.currentTarget.value;
          }}
        />
      </label>
      <button type="submit" class="deed">
        Read it so
      </button>
    </form>
  );
}
