import { useSignal } from "@preact/signals";
import { Reason, SetBefore, type SlipProps } from "./parts.js";

/** How many earlier steps make the past, and how far apart they are. */
export function HistorySlip({ session, map, close }: SlipProps) {
  const own = session.own.value;
  const history = useSignal(map.summary.history);
  const delay = useSignal(Math.max(1, map.summary.delay));
  const reason = <Reason map={map} about={/^(history|lags)/} />;
  if (own === undefined) {
    return (
      <>
        {reason}
        <SetBefore option="--history" />
      </>
    );
  }
  const longest = Math.max(1, map.timeSteps - 1);
  return (
    <form
      class="slip-form"
      onSubmit={(event) => {
        event.preventDefault();
        close();
        const { lags: _, ...request } = own.request;
        session.mapAgain({
          request: { ...request, history: history.value, delay: delay.value },
        });
      }}
    >
      <p class="slip-title">The past of a value is made of</p>
      <label>
        <input
          type="number"
          min={1}
          max={longest}
          required
          value={history.value}
          onInput={(event) => {
            history.value = event.currentTarget.valueAsNumber;
          }}
        />
        earlier values,
      </label>
      <label>
        <input
          type="number"
          min={1}
          max={longest}
          required
          value={delay.value}
          onInput={(event) => {
            delay.value = event.currentTarget.valueAsNumber;
          }}
        />
        {delay.value === 1 ? "step apart." : "steps apart."}
      </label>
      {reason}
      <button type="submit" class="deed">
        Map again
      </button>
    </form>
  );
}
