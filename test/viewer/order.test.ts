import { expect, test } from "vitest";
import { orderOf } from "../../viewer/map/order.js";

const map = {
  layout: { kind: "network" as const, nodes: 4 },
  names: ["gauge 10", "gauge 2", "Alder", "gauge 1"],
  alongPlaces: Float64Array.of(0.2, Number.NaN, 0.7, 0.2),
};

test("nodes stand as in the file unless asked otherwise", () => {
  expect(orderOf(map, "file")).toBeUndefined();
});

test("by storage the one that stores most comes first, and one without storage last", () => {
  expect([...(orderOf(map, "storage") ?? [])]).toEqual([2, 0, 3, 1]);
});

test("by name numbers go by their size", () => {
  expect([...(orderOf(map, "name") ?? [])]).toEqual([2, 3, 1, 0]);
});
