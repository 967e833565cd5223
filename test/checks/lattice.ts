/** What the reference set says of a lattice: kind and rule, size, first row. */
export interface LatticeParams {
  readonly kind: "eca" | "totalistic" | "lifelike";
  readonly rule?: number;
  readonly code?: number;
  readonly birth?: readonly number[];
  readonly survive?: readonly number[];
  readonly width: number;
  readonly height?: number;
  readonly rows: number;
  readonly alphabet: number;
  readonly cells: number;
  readonly k: readonly number[];
}

export interface LatticeData {
  readonly initialRowHex?: string;
  readonly initialRow?: readonly number[];
}

/** Runs the lattice of a reference case, from its own first row, shape [row, cell]. */
export function runLattice(params: LatticeParams, data: LatticeData): Uint8Array {
  const { cells, rows } = params;
  const states = new Uint8Array(rows * cells);
  states.set(data.initialRow ?? unpacked(data.initialRowHex ?? "", cells));
  const step = stepper(params);
  for (let row = 1; row < rows; row++) {
    step(states.subarray((row - 1) * cells, row * cells), states.subarray(row * cells));
  }
  return states;
}

function unpacked(hex: string, cells: number): Uint8Array {
  return Uint8Array.from({ length: cells }, (_, cell) => {
    const byte = Number.parseInt(hex.slice(2 * (cell >> 3), 2 * (cell >> 3) + 2), 16);
    return (byte >> (7 - (cell & 7))) & 1;
  });
}

type Step = (old: Uint8Array, next: Uint8Array) => void;

function stepper(params: LatticeParams): Step {
  const { width } = params;
  const left = (cell: number): number => (cell === 0 ? width - 1 : cell - 1);
  const right = (cell: number): number => (cell === width - 1 ? 0 : cell + 1);
  if (params.kind === "eca") {
    const rule = params.rule ?? 0;
    return (old, next) => {
      for (let cell = 0; cell < width; cell++) {
        const code = 4 * old[left(cell)] + 2 * old[cell] + old[right(cell)];
        next[cell] = (rule >> code) & 1;
      }
    };
  }
  if (params.kind === "totalistic") {
    const digits = Array.from({ length: 7 }, (_, sum) => {
      return Math.floor((params.code ?? 0) / params.alphabet ** sum) % params.alphabet;
    });
    return (old, next) => {
      for (let cell = 0; cell < width; cell++) {
        next[cell] = digits[old[left(cell)] + old[cell] + old[right(cell)]];
      }
    };
  }
  const height = params.height ?? 0;
  return (old, next) => {
    for (let y = 0; y < height; y++) {
      for (let x = 0; x < width; x++) {
        let alive = -old[y * width + x];
        for (let dy = -1; dy <= 1; dy++) {
          const row = ((y + dy + height) % height) * width;
          for (let dx = -1; dx <= 1; dx++) alive += old[row + ((x + dx + width) % width)];
        }
        const lives = (old[y * width + x] === 1 ? params.survive : params.birth)?.includes(alive);
        next[y * width + x] = lives === true ? 1 : 0;
      }
    }
  };
}
