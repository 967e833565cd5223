import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import type { LayoutKind } from "../../src/recording/layout.js";
import { placeName } from "../../src/recording/recording.js";
import { openFile } from "../../src/run/files.js";
import { mapInMemory } from "../../src/run/memory.js";
import { openRecording } from "../../src/run/open.js";
import { parseRule } from "../../src/states/rule.js";
import { CHECKS } from "./reference.js";

interface Expected {
  readonly storage_bits: number;
  readonly entropy_bits: number;
  readonly entropy_rate_bits: number;
  readonly samples: number;
  readonly negative_fraction: number;
  readonly past_states_seen: number;
  readonly storage_bits_miller_madow: number;
}

interface Case {
  readonly id: string;
  readonly file: string;
  readonly layout: LayoutKind;
  readonly estimator: string;
  readonly measure?: string;
  readonly states: string;
  readonly pool: "all" | "each";
  readonly history: number;
  readonly delay: number;
  readonly expect?: Expected;
  readonly places?: readonly (readonly [string | number, Expected])[];
  readonly spots?: readonly (readonly [time: number, place: number, bits: number])[];
  readonly tolerance: number;
}

const cases: readonly Case[] = JSON.parse(readFileSync(`${CHECKS}cases.json`, "utf8")).cases;

describe("plug-in storage of automata and wind", () => {
  for (const each of cases) {
    if (each.estimator !== "plugin" || each.measure !== undefined) continue;
    it(each.id, async () => {
      const source = await openFile(`${CHECKS}data/${each.file}`);
      const { recording } = await openRecording(source, { layout: each.layout });
      const map = await mapInMemory(recording, {
        states: parseRule(each.states),
        pool: each.pool,
        history: each.history,
        delay: each.delay,
      });
      await source.close();
      const near = (got: number, want: number): void =>
        expect(Math.abs(got - want)).toBeLessThanOrEqual(each.tolerance);
      const same = (
        got: Omit<Expected, "storage_bits_miller_madow"> & Corrected,
        want: Expected,
      ) => {
        near(got.storage_bits, want.storage_bits);
        near(got.storage_bits_corrected, want.storage_bits_miller_madow);
        near(got.entropy_bits, want.entropy_bits);
        near(got.entropy_rate_bits, want.entropy_rate_bits);
        near(got.negative_fraction, want.negative_fraction);
        expect(got.samples).toBe(want.samples);
        expect(got.past_states_seen).toBe(want.past_states_seen);
      };
      if (each.expect !== undefined) same(map.summary, each.expect);
      for (const [place, want] of each.places ?? []) {
        const name = typeof place === "number" ? placeName(recording, place) : place;
        const row = map.places.find((candidate) => candidate.place === name);
        expect(row).toBeDefined();
        if (row !== undefined) same(row, want);
      }
      const width = map.places.length;
      for (const [time, place, bits] of each.spots ?? []) {
        near(map.storage[time * width + place], bits);
      }
    });
  }
});

interface Corrected {
  readonly storage_bits_corrected: number;
}
