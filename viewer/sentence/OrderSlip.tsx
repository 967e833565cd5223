import type { NodeOrder } from "../map/order.js";
import { Choice, type SlipProps } from "./parts.js";

const ORDERS: readonly [NodeOrder, string, string][] = [
  ["file", "As in the file", "the order in which the nodes were recorded"],
  ["storage", "By storage", "the node that stores most at the top"],
  ["name", "By name", "in the order of the alphabet, numbers by their size"],
];

/** In which order the nodes of a network stand. */
export function OrderSlip({ session, close }: SlipProps) {
  return (
    <>
      {ORDERS.map(([order, name, meaning]) => (
        <Choice
          key={order}
          taken={session.order.value === order}
          onTake={() => {
            session.order.value = order;
            close();
          }}
        >
          <strong>{name}</strong> {meaning}
        </Choice>
      ))}
    </>
  );
}
