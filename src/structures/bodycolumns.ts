/** The facts of bodies and their links in typed arrays that grow. */
export class BodyColumns {
  count = 0;
  links = 0;
  time = new Int32Array(0);
  row = new Float64Array(0);
  column = new Float64Array(0);
  top = new Int32Array(0);
  left = new Int32Array(0);
  height = new Int32Array(0);
  width = new Int32Array(0);
  cells = new Int32Array(0);
  shape = new Int32Array(0);
  label = new Int32Array(0);
  linkFrom = new Int32Array(1024);
  linkTo = new Int32Array(1024);

  /** Adds so many empty bodies and gives the number of the first. */
  addBodies(more: number): number {
    const first = this.count;
    this.count += more;
    if (this.count > this.time.length) {
      const room = Math.max(this.count, 2 * this.time.length);
      this.time = longer(this.time, room);
      this.top = longer(this.top, room);
      this.left = longer(this.left, room);
      this.height = longer(this.height, room);
      this.width = longer(this.width, room);
      this.cells = longer(this.cells, room);
      this.shape = longer(this.shape, room);
      this.label = longer(this.label, room);
      this.row = longerFloats(this.row, room);
      this.column = longerFloats(this.column, room);
    }
    return first;
  }

  link(from: number, to: number): void {
    if (this.links === this.linkFrom.length) {
      this.linkFrom = longer(this.linkFrom, 2 * this.links);
      this.linkTo = longer(this.linkTo, 2 * this.links);
    }
    this.linkFrom[this.links] = from;
    this.linkTo[this.links++] = to;
  }

  /** Puts the links from `first` on in order and drops those that are there twice. */
  sortLinks(first: number): void {
    const { linkFrom, linkTo } = this;
    const order = Array.from({ length: this.links - first }, (_, i) => first + i)
      .sort((a, b) => linkFrom[a] - linkFrom[b] || linkTo[a] - linkTo[b])
      .map((link) => [linkFrom[link], linkTo[link]] as const);
    this.links = first;
    order.forEach(([from, to], i) => {
      if (i > 0 && order[i - 1][0] === from && order[i - 1][1] === to) return;
      this.link(from, to);
    });
  }

  /** The facts so far, without the room that is left. */
  filled() {
    const { count, links } = this;
    return {
      count,
      time: this.time.subarray(0, count),
      row: this.row.subarray(0, count),
      column: this.column.subarray(0, count),
      top: this.top.subarray(0, count),
      left: this.left.subarray(0, count),
      height: this.height.subarray(0, count),
      width: this.width.subarray(0, count),
      cells: this.cells.subarray(0, count),
      shape: this.shape.subarray(0, count),
      label: this.label.subarray(0, count),
      links,
      linkFrom: this.linkFrom.subarray(0, links),
      linkTo: this.linkTo.subarray(0, links),
    };
  }
}

function longer(old: Int32Array<ArrayBuffer>, room: number): Int32Array<ArrayBuffer> {
  const grown = new Int32Array(room);
  grown.set(old);
  return grown;
}

function longerFloats(old: Float64Array<ArrayBuffer>, room: number): Float64Array<ArrayBuffer> {
  const grown = new Float64Array(room);
  grown.set(old);
  return grown;
}
