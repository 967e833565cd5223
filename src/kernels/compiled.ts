import { binary } from "./binary.js";
import type { StateArray } from "./blocks.js";
import { BUCKET } from "./kdtree.js";
import type { Kernels } from "./kernels.js";
import { NEIGHBOUR_WORDS } from "./runjoins.js";
import { WIDEST_DEALT } from "./tables.js";

type Loop = (...numbers: number[]) => number;

let module: WebAssembly.Module | undefined;

/** The compiled kernels bound to a memory; every array handed to them must lie in it. */
export function compiledKernels(memory: WebAssembly.Memory): Kernels {
  module ??= new WebAssembly.Module(Uint8Array.from(atob(binary), (char) => char.charCodeAt(0)));
  const { exports } = new WebAssembly.Instance(module, { env: { memory } });
  const loop = (name: string): Loop => {
    const found = exports[name];
    if (typeof found !== "function") throw new TypeError(`the kernels hold no ${name}`);
    return (...numbers) => found(...numbers);
  };
  const byWidth = (name: string): ((states: StateArray) => Loop) => {
    const narrow = loop(`${name}8`);
    const middle = loop(`${name}16`);
    const wide = loop(`${name}32`);
    return (states) => {
      if (states instanceof Int8Array) return narrow;
      return states instanceof Int16Array ? middle : wide;
    };
  };
  const roll = byWidth("roll");
  const gather = byWidth("gather");
  const blank = byWidth("blank");
  const count = loop("count");
  const lookUp32 = loop("lookUp32");
  const lookUp64 = loop("lookUp64");
  const tally = loop("tally");
  const build = loop("build");
  const nearest = loop("nearest");
  const lists = loop("lists");
  const rearranged = loop("rearranged");
  const countWithin = loop("countWithin");
  const countSorted = loop("countSorted");
  const sort = loop("sort");
  const permuted = loop("permuted");
  const classify32 = loop("classify32");
  const classify64 = loop("classify64");
  const find = loop("findRuns");
  const join = loop("joinRuns");
  const gather32 = loop("gatherRegions32");
  const gather64 = loop("gatherRegions64");
  const columns = loop("columns");
  const neighbours = loop("neighbours");
  const widen = loop("widen");
  const at = (array: ArrayBufferView): number => {
    if (array.buffer !== memory.buffer) throw new TypeError("an array lies outside the workspace");
    return array.byteOffset;
  };
  return {
    rollIds: (
      states,
      from,
      to,
      { places, alphabet, history, delay },
      bases,
      ids,
      first = 0,
      counts,
    ) =>
      roll(states)(
        at(states),
        from,
        to,
        places,
        alphabet,
        alphabet ** (history + 1),
        (history + 1) * delay,
        delay,
        at(bases),
        at(ids),
        first,
        counts === undefined ? 0 : at(counts),
      ),
    gatherIds: (states, from, to, { places, alphabet, lags }, bases, ids) =>
      gather(states)(
        at(states),
        from,
        to,
        places,
        alphabet,
        at(lags),
        lags.length,
        at(bases),
        at(ids),
      ),
    blankIds: (states, rows, places, lags, none, ids) =>
      blank(states)(at(states), rows, places, at(lags), lags.length, none, at(ids)),
    countIds: (ids, counts) => count(at(ids), ids.length, at(counts)),
    lookUpIds: (
      ids: Uint32Array,
      table: Float32Array | Float64Array,
      out: Float32Array | Float64Array,
    ) =>
      (table instanceof Float32Array ? lookUp32 : lookUp64)(
        at(ids),
        ids.length,
        at(table),
        at(out),
      ),
    tallyIds: (ids, rows, places, pairs, none, to) =>
      tally(
        at(ids),
        rows,
        places,
        at(pairs),
        none,
        at(to.placeSums),
        at(to.rowStorage),
        at(to.rowSamples),
      ),
    buildTreeInPlace: (arrays, dimensions) =>
      build(
        at(arrays.source),
        dimensions,
        arrays.order.length,
        BUCKET,
        at(arrays.records),
        at(arrays.order),
        at(arrays.start),
        at(arrays.end),
        at(arrays.skip),
        at(arrays.parent),
        at(arrays.boxes),
        at(arrays.points),
      ),
    nearestPoints: (tree, { from, until }, wanted, { distances, found }) =>
      nearest(
        at(tree.points),
        tree.dimensions,
        at(tree.order),
        at(tree.start),
        at(tree.end),
        at(tree.skip),
        at(tree.parent),
        at(tree.boxes),
        tree.start.length,
        BUCKET,
        at(from),
        at(until),
        wanted,
        at(distances),
        found === undefined ? 0 : at(found),
      ),
    listsWithin: (tree, { from, until }, radii, into, spare) =>
      lists(
        at(tree.points),
        tree.dimensions,
        at(tree.order),
        at(tree.start),
        at(tree.end),
        at(tree.skip),
        at(tree.boxes),
        tree.start.length,
        tree.order.length,
        at(from),
        at(until),
        at(radii),
        at(into.start),
        at(into.distances),
        at(into.ids),
        at(spare.distances),
        at(spare.ids),
        at(spare.tallies),
      ),
    nearestRearranged: (
      { tree, barred, place, reach, lists: of, ...search },
      wanted,
      radii,
      near,
    ) =>
      rearranged(
        at(tree.points),
        tree.dimensions,
        at(tree.order),
        at(tree.start),
        at(tree.end),
        at(tree.skip),
        at(tree.boxes),
        tree.start.length,
        tree.order.length,
        at(barred.from),
        at(barred.until),
        at(place),
        at(reach),
        at(of.start),
        at(of.distances),
        at(of.ids),
        at(search.sorted),
        at(search.owner),
        at(search.rank),
        at(search.next),
        wanted,
        at(search.best),
        at(radii),
        at(near),
      ),
    sortInPlace: (values, { spare, tallies }) =>
      sort(at(values), values.length, at(spare), at(tallies)),
    strongestOfColumns: (cells, rows, width, rest, onto, out) =>
      columns(at(cells), rows, width, rest, onto ? 1 : 0, at(out)),
    strongestOfNeighbours: (cells, block, rest, out) =>
      neighbours(at(cells), cells.length, block, rest, at(out)),
    widenRange: (cells, range) => widen(at(cells), cells.length, at(range)),
    permutedCells: (arrays, draws) =>
      permuted(
        arrays.sizes.length,
        at(arrays.rows),
        at(arrays.rowStart),
        at(arrays.dealtFrom),
        at(arrays.columns),
        at(arrays.columnStart),
        at(arrays.sizes),
        WIDEST_DEALT,
        at(arrays.grid.binomials.shares),
        at(arrays.grid.binomials.others),
        at(arrays.grid.before),
        at(arrays.grid.guide),
        at(arrays.grid.grid),
        arrays.grid.grid.length,
        at(arrays.grid.totals),
        at(arrays.logFactorials),
        arrays.logFactorials.length,
        at(arrays.worth),
        arrays.worth.length,
        at(arrays.free),
        at(arrays.cells),
        at(arrays.symbols),
        at(arrays.states),
        at(arrays.sums),
        draws,
      ),
    countSortedWithin: (sorted, values, radii, orEqual, counts) =>
      countSorted(at(sorted), at(values), values.length, at(radii), orEqual ? 1 : 0, at(counts)),
    countPointsWithin: (tree, radii, orEqual, counts) =>
      countWithin(
        at(tree.points),
        tree.dimensions,
        at(tree.order),
        at(tree.start),
        at(tree.end),
        at(tree.skip),
        at(tree.boxes),
        tree.start.length,
        tree.order.length,
        at(radii),
        orEqual ? 1 : 0,
        at(counts),
      ),
    classifyCells: (values, count, { above, below, strongAbove, strongBelow }, classes) =>
      (values instanceof Float32Array ? classify32 : classify64)(
        at(values),
        count,
        above,
        below,
        strongAbove,
        strongBelow,
        at(classes),
      ),
    findRuns: (classes, from, to, { rows, columns }, single, runs) =>
      find(
        at(classes),
        from,
        to,
        rows,
        columns,
        single ? 1 : 0,
        at(runs.rowStart),
        at(runs.start),
        at(runs.end),
        at(runs.sign),
        at(runs.strong),
        at(runs.parent),
        at(runs.firstColumn),
        at(runs.columnCount),
        at(runs.firstRow),
        at(runs.rowCount),
      ),
    joinRuns: (runs, from, to, { rows, columns, wrap }, neighbours, contacts) =>
      join(
        at(runs.rowStart),
        at(runs.start),
        at(runs.end),
        at(runs.sign),
        at(runs.parent),
        at(runs.firstColumn),
        at(runs.columnCount),
        at(runs.firstRow),
        at(runs.rowCount),
        from,
        to,
        rows,
        columns,
        wrap ? 1 : 0,
        at(neighbours),
        neighbours.length / NEIGHBOUR_WORDS,
        at(contacts),
        contacts.length,
      ),
    gatherRegions: (values, runs, range, { rows, columns }, { regionOf, records }) =>
      (values instanceof Float32Array ? gather32 : gather64)(
        at(values),
        range.lead,
        range.end,
        range.firstStep,
        range.firstCell,
        rows,
        columns,
        at(runs.rowStart),
        at(runs.start),
        at(runs.end),
        at(runs.sign),
        at(runs.strong),
        at(runs.parent),
        at(runs.firstColumn),
        at(runs.columnCount),
        at(runs.firstRow),
        at(runs.rowCount),
        at(regionOf),
        at(records),
      ),
  };
}
