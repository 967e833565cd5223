/** Storage of all nodes under resampled time, shape [resample, node], in bits. */
export interface ResampledMeans {
  readonly count: number;
  readonly nodes: number;
  readonly means: Float64Array;
  /** Degrees of freedom of a standard error that comes from them: blocks in the record, less one. */
  readonly freedom: number;
}

/** The mean over the resamples, node by node. */
export function centresOf({ count, nodes, means }: ResampledMeans): Float64Array {
  const centres = new Float64Array(nodes);
  for (let i = 0; i < means.length; i++) centres[i % nodes] += means[i] / count;
  return centres;
}

/** The standard deviation over the resamples, node by node: the standard error of the storage. */
export function errorsOf(resampled: ResampledMeans): Float64Array {
  const { count, nodes, means } = resampled;
  const centres = centresOf(resampled);
  const squares = new Float64Array(nodes);
  for (let i = 0; i < means.length; i++) {
    squares[i % nodes] += (means[i] - centres[i % nodes]) ** 2;
  }
  return squares.map((sum) => Math.sqrt(sum / (count - 1)));
}
