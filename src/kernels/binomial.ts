/** Trials that are looked up at once; more are looked up in parts. */
export const MOST_TRIALS = 64;

/** Entries of the tables for 1 … 64 trials with one chance: a table for m trials has m + 1. */
export const BINOMIAL_ENTRIES = ((MOST_TRIALS - 1) * (MOST_TRIALS + 2)) / 2 + MOST_TRIALS + 1;

/**
 * Binomial numbers of up to 64 trials by lookup, for several chances: entry i of a table keeps i with its
 * share and gives `other` with the rest, so that every entry is met equally often.
 * @see Walker 1977, ACM Transactions on Mathematical Software 3:253–256
 */
export interface BinomialTables {
  /** Shape [chance, entry]; the table for m trials begins at entry (m − 1)(m + 2)/2. */
  readonly shares: Float64Array;
  readonly others: Uint8Array;
}

/** Fills in the tables of one chance 0 < q < 1, the `number`-th. */
export function binomialTablesInPlace(tables: BinomialTables, number: number, q: number): void {
  let at = number * BINOMIAL_ENTRIES;
  for (let trials = 1; trials <= MOST_TRIALS; trials++) {
    const end = at + trials + 1;
    chancesInPlace(tables.shares.subarray(at, end), q);
    evenOutInPlace(tables.shares.subarray(at, end), tables.others.subarray(at, end));
    at = end;
  }
}

/** The chance of 0, 1, … successes, from the likeliest outwards. */
function chancesInPlace(chances: Float64Array, q: number): void {
  const trials = chances.length - 1;
  const mode = Math.min(trials, Math.floor((trials + 1) * q));
  chances[mode] = 1;
  for (let x = mode; x < trials; x++) {
    chances[x + 1] = (chances[x] * (trials - x) * q) / ((x + 1) * (1 - q));
  }
  for (let x = mode; x > 0; x--) {
    chances[x - 1] = (chances[x] * x * (1 - q)) / ((trials - x + 1) * q);
  }
  const all = chances.reduce((sum, chance) => sum + chance, 0);
  for (let x = 0; x <= trials; x++) chances[x] /= all;
}

/** Turns chances into shares that entries keep: those with too little are filled up by those with more. */
function evenOutInPlace(shares: Float64Array, others: Uint8Array): void {
  const few: number[] = [];
  const many: number[] = [];
  for (let i = 0; i < shares.length; i++) {
    shares[i] *= shares.length;
    others[i] = i;
    (shares[i] < 1 ? few : many).push(i);
  }
  for (let poor = few.pop(); poor !== undefined; poor = few.pop()) {
    const rich = many[many.length - 1];
    // Rounding can leave a poor one over; it keeps itself.
    if (rich === undefined) {
      shares[poor] = 1;
      continue;
    }
    others[poor] = rich;
    shares[rich] -= 1 - shares[poor];
    if (shares[rich] < 1) few.push(many.pop() ?? rich);
  }
}

/** How many of so many trials succeed; the plain twin. */
export function binomial(
  { shares, others }: BinomialTables,
  number: number,
  uniform: () => number,
  trials: number,
): number {
  let successes = 0;
  for (let left = trials; left > 0; left -= MOST_TRIALS) {
    const m = Math.min(left, MOST_TRIALS);
    const x = uniform() * (m + 1);
    const entry = Math.floor(x);
    const at = number * BINOMIAL_ENTRIES + ((m - 1) * (m + 2)) / 2 + entry;
    successes += x - entry < shares[at] ? entry : others[at];
  }
  return successes;
}
