/** How a row's index names its water, case and grid point: row = (water · cases + case) · points + point. */
export interface RowShape {
  caseCount: number;
  /** Lengths of the axes; the first is outermost. */
  axisLengths: number[];
}

/** Grid points per water and case; 1 without axes. */
export const pointsOf = (shape: RowShape): number => shape.axisLengths.reduce((product, length) => product * length, 1);

export const waterOf = (row: number, shape: RowShape, points = pointsOf(shape)): number =>
  Math.floor(row / (points * shape.caseCount));

export const caseOf = (row: number, shape: RowShape, points = pointsOf(shape)): number =>
  Math.floor(row / points) % shape.caseCount;

/** Rows over which the index on axis `axis` stays the same. */
export const strideOf = (shape: RowShape, axis: number): number =>
  shape.axisLengths.slice(axis + 1).reduce((product, length) => product * length, 1);

/** Index into the values of axis number `axis`. */
export const axisIndexOf = (row: number, shape: RowShape, axis: number): number =>
  Math.floor(row / strideOf(shape, axis)) % shape.axisLengths[axis];
