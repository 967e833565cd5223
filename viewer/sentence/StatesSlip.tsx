import { useSignal } from "@preact/signals";
import { parseRule, type StateRule } from "../../src/states/rule.js";
import { Reason, SetBefore, type SlipProps } from "./parts.js";

type Kind = StateRule["kind"];

const KINDS: readonly [Kind, string][] = [
  ["exact", "the values themselves, where they are whole numbers"],
  ["quantile", "bins that hold equally many values"],
  ["width", "bins of equal width"],
];

/** How values become states. */
export function StatesSlip({ session, map, close }: SlipProps) {
  const own = session.own.value;
  const [kind = "exact", bins = "4"] = map.summary.states.split(":");
  const chosen = useSignal<string>(kind);
  const count = useSignal(Number(bins));
  const reason = <Reason map={map} about={/^states/} />;
  if (own === undefined) {
    return (
      <>
        {reason}
        <SetBefore option="--states" />
      </>
    );
  }
  return (
    <form
      class="slip-form"
      onSubmit={(event) => {
        event.preventDefault();
        close();
        const text = chosen.value === "exact" ? "exact" : `${chosen.value}:${count.value}`;
        session.mapAgain({ request: { ...own.request, states: parseRule(text) } });
      }}
    >
      <fieldset>
        <legend class="slip-title">The states are</legend>
        {KINDS.map(([each, meaning]) => (
          <label key={each}>
            <input
              type="radio"
              name="states"
              checked={chosen.value === each}
              onInput={() => {
                chosen.value = each;
              }}
            />
            {meaning}
          </label>
        ))}
      </fieldset>
      {chosen.value === "exact" ? null : (
        <label>
          <input
            type="number"
            min={2}
            max={4096}
            required
            value={count.value}
            onInput={(event) => {
              count.value = event.currentTarget.valueAsNumber;
            }}
          />
          bins
        </label>
      )}
      {reason}
      <button type="submit" class="deed">
        Map again
      </button>
    </form>
  );
}
