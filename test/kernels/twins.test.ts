import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import type { StateArray } from "../../src/kernels/blocks.js";
import { openWorkspace, type Room, usableKernels } from "../../src/kernels/workspace.js";

const NONE = 2500;

interface Drawn {
  readonly width: "int8" | "int16" | "int32";
  readonly alphabet: number;
  readonly places: number;
  readonly rows: number;
  readonly history: number;
  readonly delay: number;
  readonly lags: readonly number[];
  readonly states: readonly number[];
  readonly bases: readonly number[];
}

const drawn: fc.Arbitrary<Drawn> = fc
  .record({
    width: fc.constantFrom("int8" as const, "int16" as const, "int32" as const),
    alphabet: fc.integer({ min: 2, max: 5 }),
    places: fc.integer({ min: 1, max: 21 }),
    rows: fc.integer({ min: 1, max: 24 }),
    history: fc.integer({ min: 1, max: 3 }),
    delay: fc.integer({ min: 1, max: 3 }),
    lags: fc.uniqueArray(fc.integer({ min: 1, max: 7 }), { minLength: 1, maxLength: 3 }),
  })
  .chain((shape) =>
    fc
      .record({
        states: fc.array(fc.integer({ min: -1, max: shape.alphabet - 1 }), {
          minLength: shape.rows * shape.places,
          maxLength: shape.rows * shape.places,
        }),
        bases: fc.array(fc.integer({ min: 0, max: 3 }), {
          minLength: shape.places,
          maxLength: shape.places,
        }),
      })
      .map(({ states, bases }) => ({
        ...shape,
        lags: [...shape.lags].sort((a, b) => a - b),
        states,
        bases: bases.map((base) => base * 625),
      })),
  );

function arraysFor(room: Room, of: Drawn) {
  const cells = of.rows * of.places;
  const states: StateArray = room[of.width](cells);
  return {
    states,
    ids: room.uint32(cells),
    lags: room.int32(of.lags.length),
    bases: room.uint32(of.places),
    counts: room.uint32(NONE + 1),
    rolledCounts: room.uint32(NONE + 1),
    narrow: room.float32(NONE + 1),
    narrowOut: room.float32(cells),
    wide: room.float64(NONE + 1),
    wideOut: room.float64(cells),
    pairs: room.bigint64(2 * NONE + 2),
    placeSums: room.bigint64(3 * of.places),
    rowStorage: room.bigint64(of.rows),
    rowSamples: room.uint32(of.rows),
  };
}

/** Runs every loop once, in one of the two ways, and gives all arrays that it fills. */
function runAll(of: Drawn, kind: "compiled" | "plain") {
  const { arrays, kernels } = openWorkspace((room) => arraysFor(room, of), kind);
  const { places, rows, alphabet, history, delay } = of;
  arrays.states.set(of.states);
  arrays.bases.set(of.bases);
  arrays.lags.set(of.lags);
  for (let id = 0; id <= NONE; id++) {
    arrays.narrow[id] = Math.sin(id);
    arrays.wide[id] = Math.cos(id);
    arrays.pairs[2 * id] = BigInt(Math.round(1e12 * Math.sin(id)));
    arrays.pairs[2 * id + 1] = BigInt(id) << 33n;
  }
  const even = { places, alphabet, history, delay };
  kernels.rollIds(arrays.states, 0, rows, even, arrays.bases, arrays.ids, 0, arrays.rolledCounts);
  const rolled = arrays.ids.slice();
  kernels.gatherIds(
    arrays.states,
    0,
    rows,
    { places, alphabet, lags: arrays.lags },
    arrays.bases,
    arrays.ids,
  );
  const gathered = arrays.ids.slice();
  const cut = Math.min(rows, of.lags[of.lags.length - 1] ?? 0);
  arrays.ids.fill(NONE, 0, cut * places);
  kernels.blankIds(arrays.states, rows, places, arrays.lags, NONE, arrays.ids);
  kernels.countIds(arrays.ids, arrays.counts);
  kernels.lookUpIds(arrays.ids, arrays.narrow, arrays.narrowOut);
  kernels.lookUpIds(arrays.ids, arrays.wide, arrays.wideOut);
  kernels.tallyIds(arrays.ids, rows, places, arrays.pairs, NONE, arrays);
  return { ...arrays, rolled, gathered };
}

const bytesOf = (array: ArrayBufferView | undefined): string =>
  array === undefined
    ? "missing"
    : Buffer.from(array.buffer, array.byteOffset, array.byteLength).toString("base64");

describe("compiled kernels and their plain twins", () => {
  it("compiled ones can be used here", () => {
    expect(usableKernels()).toBe("compiled");
  });

  it("agree to the bit in every loop", () => {
    fc.assert(
      fc.property(drawn, (of) => {
        const compiled = runAll(of, "compiled");
        const plain = runAll(of, "plain");
        const twins = new Map<string, ArrayBufferView>(Object.entries(plain));
        for (const [name, array] of Object.entries(compiled)) {
          expect([name, bytesOf(array)]).toEqual([name, bytesOf(twins.get(name))]);
        }
      }),
      { numRuns: 400 },
    );
  });

  it("give the same ids when a short buffer follows the slab", () => {
    fc.assert(
      fc.property(drawn, fc.integer({ min: 1, max: 5 }), (of, tile) => {
        const whole = runAll(of, "plain").rolled;
        const { places, rows, alphabet, history, delay } = of;
        const { arrays, kernels } = openWorkspace((room) => arraysFor(room, of));
        arrays.states.set(of.states);
        arrays.bases.set(of.bases);
        const even = { places, alphabet, history, delay };
        const followed = new Uint32Array(whole.length);
        for (let from = 0; from < rows; from += tile) {
          const to = Math.min(rows, from + tile);
          const first = Math.max(0, from - delay);
          kernels.rollIds(arrays.states, from, to, even, arrays.bases, arrays.ids, first);
          const fresh = arrays.ids.subarray((from - first) * places, (to - first) * places);
          followed.set(fresh, from * places);
          const next = Math.max(0, to - delay);
          arrays.ids.copyWithin(0, (next - first) * places, (to - first) * places);
        }
        expect(followed).toEqual(whole);
      }),
    );
  });
});

describe("ids worked out by hand", () => {
  it("put the next value lowest and the newest lag above it", () => {
    const { arrays, kernels } = openWorkspace((room) => ({
      states: room.int8(5),
      bases: room.uint32(1),
      ids: room.uint32(5),
    }));
    arrays.states.set([1, 2, 0, 1, 1]);
    const even = { places: 1, alphabet: 3, history: 2, delay: 1 };
    kernels.rollIds(arrays.states, 0, 5, even, arrays.bases, arrays.ids);
    // Window 1 2 0 → 0 + 2·3 + 1·9, window 2 0 1 → 1 + 0·3 + 2·9, window 0 1 1 → 1 + 1·3 + 0·9.
    expect([...arrays.ids.subarray(2)]).toEqual([15, 19, 4]);
  });

  it("of chosen lags take just those steps", () => {
    const { arrays, kernels } = openWorkspace((room) => ({
      states: room.int16(5),
      bases: room.uint32(1),
      lags: room.int32(2),
      ids: room.uint32(5),
    }));
    arrays.states.set([1, 2, 0, 1, 1]);
    arrays.lags.set([1, 3]);
    const lagged = { places: 1, alphabet: 3, lags: arrays.lags };
    kernels.gatherIds(arrays.states, 0, 5, lagged, arrays.bases, arrays.ids);
    // At step 3: next 1, lag 1 is 0, lag 3 is 1. At step 4: next 1, lag 1 is 1, lag 3 is 2.
    expect([...arrays.ids.subarray(3)]).toEqual([1 + 0 * 3 + 1 * 9, 1 + 1 * 3 + 2 * 9]);
  });
});

describe("a workspace", () => {
  it("hands out zeroed arrays that do not overlap, all in one memory", () => {
    const { arrays } = openWorkspace((room) => [room.int8(3), room.float64(2), room.uint32(5)]);
    const [first, second, third] = arrays;
    first?.fill(1);
    second?.fill(2);
    third?.fill(3);
    expect([...(first ?? []), ...(second ?? []), ...(third ?? [])]).toEqual([
      1, 1, 1, 2, 2, 3, 3, 3, 3, 3,
    ]);
    expect(new Set(arrays.map((array) => array.buffer)).size).toBe(1);
  });

  it("refuses an array that lies outside it", () => {
    const { arrays, kernels } = openWorkspace((room) => ({ counts: room.uint32(4) }), "compiled");
    expect(() => kernels.countIds(new Uint32Array(3), arrays.counts)).toThrow(
      /outside the workspace/,
    );
  });
});
