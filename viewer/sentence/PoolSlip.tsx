import { Choice, Reason, SetBefore, type SlipProps } from "./parts.js";

const POOLS: readonly ["all" | "each", string, string][] = [
  ["all", "One for all", "every place follows the same rule"],
  ["each", "One each", "every place may have a rule of its own"],
];

/** Which places share one model. */
export function PoolSlip({ session, map, close }: SlipProps) {
  const own = session.own.value;
  return (
    <>
      {own === undefined ? <SetBefore option="--pool" /> : null}
      {own === undefined
        ? null
        : POOLS.map(([pool, name, meaning]) => (
            <Choice
              key={pool}
              taken={map.summary.pool === pool}
              onTake={() => {
                close();
                session.mapAgain({ request: { ...own.request, pool } });
              }}
            >
              <strong>{name}</strong> {meaning}
            </Choice>
          ))}
      <Reason map={map} about={/^pool/} />
    </>
  );
}
