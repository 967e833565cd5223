import "pixi.js/unsafe-eval";
import {
  autoDetectRenderer,
  CanvasSource,
  Container,
  type Renderer,
  Sprite,
  Texture,
} from "pixi.js";
import { type Plane, planeKey } from "../map/plane.js";
import { hasHardwareWebgl } from "./hardware.js";
import type { Ink } from "./ink.js";
import {
  cellsOfTile,
  type Patch,
  pictureSize,
  type Tiling,
  tilesWithin,
  tilingFor,
} from "./tiling.js";
import type { Size, View } from "./view.js";

/** All that a picture of a field depends on. Sizes are in CSS pixels. */
export interface Scene {
  readonly map: number;
  readonly field: string;
  readonly plane: Plane;
  readonly ink: Ink;
  readonly view: View;
  readonly plot: Size;
  /** Device pixels a CSS pixel. */
  readonly density: number;
}

/** One tile of a scene, to be coloured. */
export interface TileWish extends Pick<Scene, "map" | "field" | "plane" | "ink"> {
  readonly tiling: Tiling;
  readonly patch: Patch;
}

/** Gives the colours of a tile, a 32-bit word a pixel. */
export type TileMaker = (wish: TileWish) => Promise<Uint32Array<ArrayBuffer>>;

/** Draws scenes onto one canvas. */
export interface Painter {
  readonly canvas: HTMLCanvasElement;
  /** Draws what is at hand of a scene and asks for the rest. Gives whether all of it was at hand. */
  paint(scene: Scene): boolean;
  destroy(): void;
}

/** A place for the picture of a tile, which may still be that of an earlier scene. */
interface Slot {
  readonly sprite: Sprite;
  readonly source: CanvasSource;
  readonly context: CanvasRenderingContext2D;
  readonly patch: Patch;
  /** What the picture shows; undefined before the first one has come. */
  content: string | undefined;
  /** What was asked for and could not be had. */
  refused: string | undefined;
  used: number;
}

const MOST_SLOTS = 96;
const MOST_UNDER_WAY = 2;

/**
 * Makes a painter: on a plain 2-D canvas, unless real graphics hardware is there. Tiles are coloured
 * elsewhere, so panning only moves pictures; until a tile has come, what was there before shows.
 *
 * @param make colours a tile
 * @param onArrival is told when a tile has come, so that the scene is painted again
 * @param onFailure is told when one cannot be had
 */
export async function makePainter(
  make: TileMaker,
  onArrival: () => void,
  onFailure: (error: unknown) => void,
): Promise<Painter> {
  const renderer = await autoDetectRenderer({
    preference: hasHardwareWebgl() ? ["webgl", "canvas"] : ["canvas"],
    backgroundAlpha: 0,
    antialias: false,
    width: 1,
    height: 1,
    skipExtensionImports: true,
  });
  return painterOn(renderer, make, onArrival, onFailure);
}

interface Wanted {
  readonly slot: Slot;
  readonly content: string;
  readonly wish: TileWish;
}

function painterOn(
  renderer: Renderer,
  make: TileMaker,
  onArrival: () => void,
  onFailure: (error: unknown) => void,
): Painter {
  const canvas = renderer.canvas;
  const stage = new Container({ eventMode: "none", sortableChildren: true });
  const slots = new Map<string, Slot>();
  const underWay = new Set<Slot>();
  let queue: Wanted[] = [];
  let paints = 0;
  let gone = false;

  const fetchNext = (): void => {
    while (underWay.size < MOST_UNDER_WAY) {
      const at = queue.findIndex(({ slot }) => !underWay.has(slot));
      const [wanted] = at < 0 ? [] : queue.splice(at, 1);
      if (wanted === undefined) return;
      const { slot, content, wish } = wanted;
      underWay.add(slot);
      make(wish)
        .then(
          (words) => {
            if (gone || slot.sprite.destroyed) return;
            fill(slot, words);
            slot.content = content;
            onArrival();
          },
          (error: unknown) => {
            slot.refused = content;
            if (!gone) onFailure(error);
          },
        )
        .finally(() => {
          underWay.delete(slot);
          fetchNext();
        });
    }
  };

  return {
    canvas,
    paint: ({ map, field, plane, ink, view, plot, density }) => {
      paints++;
      const width = Math.max(1, Math.round(plot.width * density));
      const height = Math.max(1, Math.round(plot.height * density));
      if (canvas.width !== width || canvas.height !== height) renderer.resize(width, height);
      const x = { scale: view.scaleX * density, start: view.left * density };
      const y = { scale: view.scaleY * density, start: view.top * density };
      const tiling = tilingFor(x.scale, y.scale);
      const shape = `${plane.width}×${plane.height} ${plane.across}`;
      const content = `${map} ${field} ${planeKey(plane)} ${ink.key}`;
      const [firstX, lastX] = touched(tiling.x, plane.width, x, width);
      const [firstY, lastY] = touched(tiling.y, plane.height, y, height);
      const visible = new Set<Slot>();
      const wanted: Wanted[] = [];
      let fresh = true;
      let covered = true;
      for (let j = firstY; j <= lastY; j++) {
        for (let i = firstX; i <= lastX; i++) {
          const patch = {
            x: cellsOfTile(tiling.x, plane.width, i),
            y: cellsOfTile(tiling.y, plane.height, j),
          };
          const slot = slotFor(slots, stage, tiling, patch, `${shape} ${i},${j}`);
          slot.used = paints;
          visible.add(slot);
          if (slot.content === undefined) covered = false;
          if (slot.content === content || slot.refused === content) continue;
          fresh = false;
          wanted.push({ slot, content, wish: { map, field, plane, ink, tiling, patch } });
        }
      }
      queue = nearestFirst(wanted, view, plot);
      for (const [key, slot] of slots) {
        const own = visible.has(slot);
        // Until the tiles of this zoom are there, those of the zoom before show beneath.
        slot.sprite.visible =
          slot.content !== undefined && key.includes(shape) && (own || !covered);
        slot.sprite.zIndex = own ? 1 : 0;
        if (slot.sprite.visible) place(slot.sprite, slot.patch, x, y);
      }
      renderer.render(stage);
      dropUnused(slots, visible);
      fetchNext();
      return fresh;
    },
    destroy: () => {
      gone = true;
      for (const { sprite } of slots.values())
        sprite.destroy({ texture: true, textureSource: true });
      slots.clear();
      renderer.destroy({ removeView: true });
    },
  };
}

interface Along {
  readonly scale: number;
  readonly start: number;
}

function touched(cut: Tiling["x"], length: number, along: Along, room: number): [number, number] {
  return tilesWithin(cut, length, -along.start / along.scale, (room - along.start) / along.scale);
}

/** Tiles in the middle of the plot are wanted most. */
function nearestFirst(wanted: Wanted[], view: View, plot: Size): Wanted[] {
  const away = ({ slot }: Wanted): number => {
    const middle = ([from, to]: readonly [number, number]): number => (from + to) / 2;
    const x = view.left + middle(slot.patch.x) * view.scaleX - plot.width / 2;
    const y = view.top + middle(slot.patch.y) * view.scaleY - plot.height / 2;
    return Math.hypot(x, y);
  };
  return wanted.sort((a, b) => away(a) - away(b));
}

function slotFor(
  slots: Map<string, Slot>,
  stage: Container,
  tiling: Tiling,
  patch: Patch,
  where: string,
): Slot {
  const { width, height } = pictureSize(tiling, patch);
  const scale = [tiling.x.cells, tiling.x.pixels, tiling.y.cells, tiling.y.pixels, tiling.soft];
  const key = `${scale.join()} ${where} ${width}×${height}`;
  const known = slots.get(key);
  if (known !== undefined) return known;
  const canvas = document.createElement("canvas");
  canvas.width = width;
  canvas.height = height;
  const context = canvas.getContext("2d");
  if (context === null) throw new Error("this browser gives no 2-D canvas");
  const source = new CanvasSource({
    resource: canvas,
    scaleMode: tiling.soft ? "linear" : "nearest",
  });
  const sprite = new Sprite(new Texture({ source }));
  stage.addChild(sprite);
  const slot: Slot = {
    sprite,
    source,
    context,
    patch,
    content: undefined,
    refused: undefined,
    used: 0,
  };
  slots.set(key, slot);
  return slot;
}

function fill({ context, source }: Slot, words: Uint32Array<ArrayBuffer>): void {
  const bytes = new Uint8ClampedArray(words.buffer);
  context.putImageData(new ImageData(bytes, context.canvas.width, context.canvas.height), 0, 0);
  source.update();
}

/** Edges go to whole device pixels, so that neighbours meet without a seam. */
function place(sprite: Sprite, patch: Patch, x: Along, y: Along): void {
  const edge = (along: Along, cell: number): number => Math.round(along.start + cell * along.scale);
  const left = edge(x, patch.x[0]);
  const top = edge(y, patch.y[0]);
  sprite.position.set(left, top);
  sprite.setSize(edge(x, patch.x[1]) - left, edge(y, patch.y[1]) - top);
}

function dropUnused(slots: Map<string, Slot>, visible: ReadonlySet<Slot>): void {
  if (slots.size <= MOST_SLOTS) return;
  const oldest = [...slots].sort(([, one], [, other]) => one.used - other.used);
  for (const [key, slot] of oldest.slice(0, slots.size - MOST_SLOTS)) {
    if (visible.has(slot)) continue;
    slot.sprite.destroy({ texture: true, textureSource: true });
    slots.delete(key);
  }
}
