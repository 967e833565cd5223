/** Of all the places that a wrapped coordinate stands for, the one nearest to another coordinate. */
export function nearestImage(coordinate: number, near: number, length: number): number {
  return coordinate - length * Math.round((coordinate - near) / length);
}

/** The place on the lattice that a coordinate stands for, from half a cell before 0 on. */
export function onLattice(coordinate: number, length: number): number {
  return coordinate - length * Math.floor((coordinate + 0.5) / length);
}
