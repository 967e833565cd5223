import { describe, expect, it } from "vitest";
import { drawsFrom } from "../../samples/random.js";
import type { Lattice } from "../../src/structures/statetable.js";
import { trackCatalogue } from "../../src/structures/trackcatalogue.js";
import {
  kindsTable,
  meetingsTable,
  reactionsTable,
  tracksTable,
} from "../../src/structures/tracktables.js";
import { bodiesOf, TOUCHING } from "./followed.js";

const RING: Lattice = { rows: 1, columns: 200, wrap: true };

/** A body of three cells that begins at a cell and moves evenly from a step on, up to another. */
interface Drawn {
  readonly from: number;
  readonly to: number;
  readonly cell: number;
  readonly velocity: number;
}

function drawn(bodies: readonly Drawn[], steps: number): Uint8Array {
  const mask = new Uint8Array(steps * RING.columns);
  for (const { from, to, cell, velocity } of bodies) {
    for (let step = from; step < to; step++) {
      const at = Math.round(cell + velocity * (step - from));
      for (let c = at - 1; c <= at + 1; c++) mask[step * 200 + (((c % 200) + 200) % 200)] = 1;
    }
  }
  return mask;
}

const follow = (bodies: readonly Drawn[], steps: number) =>
  trackCatalogue(bodiesOf(drawn(bodies, steps), RING));

describe("a track", () => {
  it("is the whole way of a body that meets no other, around the ring as often as it likes", () => {
    const { tracks, meetings } = follow([{ from: 5, to: 395, cell: 50, velocity: 1 }], 400);
    expect(tracks).toHaveLength(1);
    expect(meetings).toEqual([]);
    const [track] = tracks;
    expect([track.start, track.end, track.width, track.cells]).toEqual([5, 394, 3, 3]);
    expect(track.columnVelocity).toBe(1);
    expect(track.column[389] - track.column[0]).toBe(389);
  });

  it("ends where the body bends, and another begins", () => {
    const { tracks, meetings } = follow(
      [
        { from: 0, to: 60, cell: 50, velocity: 0.5 },
        { from: 60, to: 120, cell: 80, velocity: -0.5 },
      ],
      120,
    );
    expect(tracks.map((track) => track.columnVelocity)).toEqual([0.5, -0.5]);
    expect(meetings).toHaveLength(1);
    expect(Math.abs(meetings[0].column - 79.5)).toBeLessThan(2);
  });

  it("has no piece of fewer steps than asked for", () => {
    const mask = drawn([{ from: 0, to: 30, cell: 50, velocity: 0 }], 40);
    const tracksOf = (leastSteps: number): number =>
      trackCatalogue(bodiesOf(mask, RING), { leastSteps, margin: 5 }).tracks.length;
    expect(tracksOf(30)).toBe(1);
    expect(tracksOf(31)).toBe(0);
  });

  it("is not cut by a spur of it, nor where it parts for a few steps", () => {
    const mask = drawn([{ from: 0, to: 100, cell: 50, velocity: 0 }], 100);
    // A spur that leaves to the right for four steps, and a hole of three steps.
    for (let step = 30; step < 34; step++) mask[step * 200 + 53 + step - 30] = 1;
    for (let step = 60; step < 100; step++) mask.fill(1, step * 200 + 51, step * 200 + 57);
    for (let step = 70; step < 73; step++) mask.fill(0, step * 200 + 51, step * 200 + 55);
    const { tracks, meetings } = trackCatalogue(bodiesOf(mask, RING));
    expect(tracks.map(({ start, end }) => [start, end])).toEqual([[0, 99]]);
    expect(meetings).toEqual([]);
  });

  it("goes on where two bodies side by side touch for a few steps", () => {
    const mask = drawn(
      [
        { from: 0, to: 200, cell: 50, velocity: 0.5 },
        { from: 0, to: 200, cell: 57, velocity: 0.5 },
      ],
      200,
    );
    for (let step = 90; step < 94; step++) mask.fill(1, step * 200 + 95, step * 200 + 104);
    const { tracks, meetings } = trackCatalogue(bodiesOf(mask, RING));
    expect(tracks.map(({ start, end }) => [start, end])).toEqual([
      [0, 199],
      [0, 199],
    ]);
    expect(meetings).toEqual([]);
  });

  it("has the period of a shape that comes back, and moves as far as the shape does in it", () => {
    const mask = new Uint8Array(100 * 200);
    // Shapes of 1, 2 and 3 cells in turn; two cells to the left in three steps.
    for (let step = 0; step < 100; step++) {
      const left = 150 - 2 * Math.floor(step / 3);
      mask.fill(1, step * 200 + left, step * 200 + left + 1 + (step % 3));
    }
    const { tracks, kinds } = trackCatalogue(bodiesOf(mask, RING));
    expect(tracks).toHaveLength(1);
    expect([tracks[0].period, tracks[0].movedColumns]).toEqual([3, -2]);
    expect(tracks[0].columnVelocity).toBe(-2 / 3);
    expect(kinds.map(({ name }) => name)).toEqual(["-2/3"]);
  });

  it("does not pass from one run of an ensemble into the next", () => {
    const mask = drawn([{ from: 0, to: 100, cell: 50, velocity: 0 }], 100);
    const gathered = bodiesOf(mask, RING, TOUCHING, undefined, 50, [0, 50]);
    expect(trackCatalogue(gathered).tracks.map(({ start }) => start)).toEqual([0, 50]);
  });

  it("is the same whichever way the map is cut into slabs", () => {
    const draws = drawsFrom(3);
    const mask = Uint8Array.from({ length: 300 * 200 }, () => (draws.uniform() < 0.3 ? 1 : 0));
    const whole = trackCatalogue(bodiesOf(mask, RING));
    expect(whole.tracks.length).toBeGreaterThan(10);
    for (const together of [1, 7, 299]) {
      expect(trackCatalogue(bodiesOf(mask, RING, TOUCHING, undefined, together))).toEqual(whole);
    }
  });
});

describe("a crossing of ten bodies", () => {
  // Five from the left and five from the right, all in the same place at step 50.
  const crossing = [1, 0.8, 0.6, 0.4, 0.2, -0.2, -0.4, -0.6, -0.8, -1].map((velocity) => ({
    from: 0,
    to: 101,
    cell: 100 - 50 * velocity,
    velocity,
  }));
  const catalogue = follow(crossing, 101);

  it("is ten tracks that come and ten that go, and their meetings, not one blob", () => {
    const { tracks, meetings } = catalogue;
    expect(tracks.length).toBeGreaterThanOrEqual(20);
    const coming = tracks.filter(({ start }) => start === 0).map((t) => t.columnVelocity);
    const going = tracks.filter(({ end }) => end === 100).map((t) => t.columnVelocity);
    for (const side of [coming, going]) {
      expect(side).toHaveLength(10);
      const ascending = [...side].sort((a, b) => a - b);
      crossing
        .map(({ velocity }) => velocity)
        .sort((a, b) => a - b)
        .forEach((velocity, i) => {
          expect(Math.abs(ascending[i] - velocity)).toBeLessThan(0.03);
        });
    }
    expect(meetings.some(({ ins }) => ins.length > 1)).toBe(true);
    for (const { column } of meetings) expect(Math.abs(column - 100)).toBeLessThan(30);
  });

  it("stands in tables that refer to each other", () => {
    const tracks = tracksTable(catalogue);
    expect(tracks.columns.slice(0, 7)).toEqual([
      "track",
      "start",
      "end",
      "steps",
      "velocity",
      "velocity_se",
      "period",
    ]);
    expect(tracks.rows.every((row) => row.length === tracks.columns.length)).toBe(true);
    const meetings = meetingsTable(catalogue);
    const after = tracks.columns.indexOf("meeting_after");
    for (const row of meetings.rows) {
      const ins = String(row[meetings.columns.indexOf("tracks_in")]);
      for (const track of ins.split(" ").filter((text) => text !== "")) {
        expect(tracks.rows[Number(track) - 1][after]).toBe(row[0]);
      }
    }
    const counted = reactionsTable(catalogue).rows.reduce((sum, row) => sum + Number(row[1]), 0);
    expect(counted).toBe(meetings.rows.length);
    const ofKinds = kindsTable(catalogue).rows.reduce((sum, row) => sum + Number(row[1]), 0);
    expect(ofKinds).toBe(tracks.rows.length);
  });
});

describe("a meeting", () => {
  it("says what goes in and what comes out, by kind, and where", () => {
    const { meetings, reactions } = follow(
      [
        { from: 0, to: 50, cell: 50, velocity: 1 },
        { from: 0, to: 50, cell: 150, velocity: -1 },
        { from: 50, to: 100, cell: 100, velocity: 0 },
      ],
      100,
    );
    expect(meetings).toHaveLength(1);
    expect(reactions).toEqual([{ reaction: "1/1 + -1/1 -> 0/1", ins: 2, outs: 1, count: 1 }]);
    expect(Math.abs(meetings[0].column - 100)).toBeLessThan(1);
    expect(Math.abs(meetings[0].start - 49)).toBeLessThan(3);
  });

  it("may take in and let out several of a kind, and may lie on the edge", () => {
    const { reactions, meetings } = follow(
      [
        { from: 0, to: 50, cell: -50, velocity: 1 },
        { from: 0, to: 50, cell: 50, velocity: -1 },
        { from: 50, to: 100, cell: 0, velocity: 1 },
        { from: 50, to: 100, cell: 0, velocity: -1 },
        { from: 50, to: 100, cell: 0, velocity: 0 },
      ],
      100,
    );
    expect(reactions[0].reaction).toBe("1/1 + -1/1 -> 1/1 + 0/1 + -1/1");
    expect(Math.abs(((meetings[0].column + 100) % 200) - 100)).toBeLessThan(1);
  });
});
