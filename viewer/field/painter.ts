import "pixi.js/unsafe-eval";
import {
  autoDetectRenderer,
  CanvasSource,
  Container,
  type Renderer,
  Sprite,
  Texture,
} from "pixi.js";
import type { Plane } from "../map/plane.js";
import { colourPatch } from "./colour.js";
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

/** All that a picture of the field depends on. Sizes are in CSS pixels. */
export interface Scene {
  readonly plane: Plane;
  readonly ink: Ink;
  readonly view: View;
  readonly plot: Size;
  /** Device pixels a CSS pixel. */
  readonly density: number;
}

/** Draws scenes onto one canvas. */
export interface Painter {
  readonly canvas: HTMLCanvasElement;
  paint(scene: Scene): void;
  destroy(): void;
}

interface Tile {
  readonly sprite: Sprite;
  readonly source: CanvasSource;
  readonly context: CanvasRenderingContext2D;
  /** The ink and the plane that the picture was last coloured with. */
  ink: Ink | undefined;
  plane: Plane | undefined;
  used: number;
}

const MOST_TILES = 64;

/**
 * Makes the painter: on a plain 2-D canvas, unless real graphics hardware is there. Cells are coloured
 * on the processor into tiles, since a plain canvas has no shaders; panning only moves the tiles.
 */
export async function makePainter(): Promise<Painter> {
  const renderer = await autoDetectRenderer({
    preference: hasHardwareWebgl() ? ["webgl", "canvas"] : ["canvas"],
    backgroundAlpha: 0,
    antialias: false,
    width: 1,
    height: 1,
    skipExtensionImports: true,
  });
  return painterOn(renderer);
}

function painterOn(renderer: Renderer): Painter {
  const canvas = renderer.canvas;
  const stage = new Container({ eventMode: "none" });
  const tiles = new Map<string, Tile>();
  let paints = 0;

  return {
    canvas,
    paint: ({ plane, ink, view, plot, density }) => {
      paints++;
      const width = Math.max(1, Math.round(plot.width * density));
      const height = Math.max(1, Math.round(plot.height * density));
      if (canvas.width !== width || canvas.height !== height) renderer.resize(width, height);
      const x = { scale: view.scaleX * density, start: view.left * density };
      const y = { scale: view.scaleY * density, start: view.top * density };
      const tiling = tilingFor(x.scale, y.scale);
      const [firstX, lastX] = touched(tiling.x, plane.width, x, width);
      const [firstY, lastY] = touched(tiling.y, plane.height, y, height);
      for (const tile of tiles.values()) tile.sprite.visible = false;
      for (let j = firstY; j <= lastY; j++) {
        for (let i = firstX; i <= lastX; i++) {
          const patch = {
            x: cellsOfTile(tiling.x, plane.width, i),
            y: cellsOfTile(tiling.y, plane.height, j),
          };
          const tile = tileFor(tiles, stage, tiling, patch, `${i},${j}`);
          tile.used = paints;
          colourTile(tile, plane, ink, tiling, patch);
          place(tile.sprite, patch, x, y);
        }
      }
      renderer.render(stage);
      dropUnused(tiles);
    },
    destroy: () => {
      for (const tile of tiles.values())
        tile.sprite.destroy({ texture: true, textureSource: true });
      tiles.clear();
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

function tileFor(
  tiles: Map<string, Tile>,
  stage: Container,
  tiling: Tiling,
  patch: Patch,
  where: string,
): Tile {
  const { width, height } = pictureSize(tiling, patch);
  const scale = [tiling.x.cells, tiling.x.pixels, tiling.y.cells, tiling.y.pixels, tiling.soft];
  const key = `${scale.join()} ${where} ${width}×${height}`;
  const known = tiles.get(key);
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
  const tile = { sprite, source, context, ink: undefined, plane: undefined, used: 0 };
  tiles.set(key, tile);
  return tile;
}

function colourTile(tile: Tile, plane: Plane, ink: Ink, tiling: Tiling, patch: Patch): void {
  if (tile.ink === ink && tile.plane === plane) return;
  const { width, height } = tile.context.canvas;
  const picture = tile.context.createImageData(width, height);
  colourPatch(plane, ink, tiling, patch, new Uint32Array(picture.data.buffer));
  tile.context.putImageData(picture, 0, 0);
  tile.source.update();
  tile.ink = ink;
  tile.plane = plane;
}

/** Edges go to whole device pixels, so that neighbours meet without a seam. */
function place(sprite: Sprite, patch: Patch, x: Along, y: Along): void {
  const edge = (along: Along, cell: number): number => Math.round(along.start + cell * along.scale);
  const left = edge(x, patch.x[0]);
  const top = edge(y, patch.y[0]);
  sprite.visible = true;
  sprite.position.set(left, top);
  sprite.setSize(edge(x, patch.x[1]) - left, edge(y, patch.y[1]) - top);
}

function dropUnused(tiles: Map<string, Tile>): void {
  if (tiles.size <= MOST_TILES) return;
  const oldest = [...tiles].sort(([, one], [, other]) => one.used - other.used);
  for (const [key, tile] of oldest.slice(0, tiles.size - MOST_TILES)) {
    if (tile.sprite.visible) continue;
    tile.sprite.destroy({ texture: true, textureSource: true });
    tiles.delete(key);
  }
}
