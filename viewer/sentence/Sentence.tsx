import type { Session } from "../page/session.js";
import { orderPhrase, phrasesFor } from "./phrases.js";
import "./sentence.css";
import type { SlipName, Slips } from "./slips.js";
import { Word } from "./Word.js";

interface Props {
  readonly session: Session;
  readonly slips: Slips;
}

/** One sentence that says what is shown. Its marked words are the controls. */
export function Sentence({ session, slips }: Props) {
  const map = session.map.value;
  const field = session.field.value;
  if (map === undefined || field === undefined) return null;
  const phrases = phrasesFor(map, field);
  const cautions = map.summary.warnings.length;
  const word = (opens: SlipName, text: string, after: string) => (
    <span class="piece">
      <Word opens={opens} slips={slips}>
        {text}
      </Word>
      {after}
    </span>
  );
  const grid = map.layout.kind === "grid";
  return (
    <h1 class="sentence">
      {word("field", phrases.field, "")} in {word("title", map.title, ":")}{" "}
      {map.layout.kind === "network" ? (
        <>
          {word("size", phrases.places, "")} {word("order", orderPhrase(session.order.value), "")} ×{" "}
          {phrases.steps}
        </>
      ) : (
        word("size", `${phrases.places} × ${phrases.steps}`, grid ? "," : "")
      )}{" "}
      {grid ? null : <Direction session={session} />} {word("history", phrases.history, ",")}{" "}
      {word("states", phrases.states, ",")} {word("pool", phrases.pool, ",")}{" "}
      {word("average", phrases.average, cautions === 0 ? "." : ",")}{" "}
      {cautions === 0 ? null : <>with {word("cautions", phrases.cautions, ".")}</>}
    </h1>
  );
}

function Direction({ session }: { readonly session: Session }) {
  const right = session.right.value;
  return (
    <span class="piece">
      <button
        type="button"
        class="word"
        title={right ? "Let time run down" : "Let time run to the right"}
        onClick={() => {
          session.right.value = !right;
        }}
      >
        {right ? "running right" : "running down"}
      </button>
      ,
    </span>
  );
}
