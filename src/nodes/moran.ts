import type { Network } from "../recording/network.js";

/** What Moran's I is on average where values do not follow the links: −1 / (n − 1). */
export function expectedMoran(nodes: number): number {
  return -1 / (nodes - 1);
}

/**
 * Moran's I: whether linked nodes have values that are alike (above its expected value) or unlike
 * (below). I = (n / Σw) Σ w_ij (x_i − x̄)(x_j − x̄) / Σ (x_i − x̄)², over all links i → j with their
 * weights; a link without direction counts both ways, which changes nothing.
 *
 * @param values one number a node, all finite
 * @returns NaN without links, or where all values are the same
 * @see Moran 1950, Biometrika 37:17–23; Cliff & Ord 1981, Spatial Processes, for weights
 */
export function moransI(network: Network, values: Float64Array): number {
  const { sources, targets, weights } = network;
  const mean = values.reduce((sum, value) => sum + value, 0) / values.length;
  let variance = 0;
  for (const value of values) variance += (value - mean) ** 2;
  let products = 0;
  let total = 0;
  for (let i = 0; i < sources.length; i++) {
    products += weights[i] * (values[sources[i]] - mean) * (values[targets[i]] - mean);
    total += weights[i];
  }
  return variance === 0 || total === 0
    ? Number.NaN
    : ((values.length / total) * products) / variance;
}
