import { describeLayout, type LayoutKind } from "../../src/recording/layout.js";
import { Choice, SetBefore, type SlipProps } from "./parts.js";

const KINDS: readonly [LayoutKind, string, string][] = [
  ["line", "A line", "each cell beside the next"],
  ["network", "A network", "nodes in no order of their own"],
];

/** How the places lie to each other. */
export function SizeSlip({ session, map, close }: SlipProps) {
  const own = session.own.value;
  return (
    <>
      <p class="slip-title">Read as {describeLayout(map.layout)}.</p>
      {own === undefined ? <SetBefore option="--layout" /> : null}
      {own === undefined || map.layout.kind === "grid"
        ? null
        : KINDS.map(([kind, name, meaning]) => (
            <Choice
              key={kind}
              taken={map.layout.kind === kind}
              onTake={() => {
                close();
                session.mapAgain({ wish: { ...own.wish, layout: kind } });
              }}
            >
              <strong>{name}</strong> {meaning}
            </Choice>
          ))}
    </>
  );
}
