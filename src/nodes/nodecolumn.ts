/** A number for every node, under the name that tables and graphs give it; NaN where there is none. */
export interface NodeColumn {
  readonly name: string;
  readonly values: Float64Array;
}
