/**
 * Solves a system of linear equations by Gaussian elimination with partial pivoting.
 * @param matrix  row by row, size times size; overwritten
 * @param right   right-hand side; overwritten
 * @returns       the solution
 * @throws RangeError when the matrix is singular: the caller asked for what does not exist
 */
export function solveLinear(matrix: Float64Array, right: Float64Array): Float64Array {
  const size = right.length;
  const at = (row: number, column: number): number => matrix[row * size + column]!;
  for (let k = 0; k < size; k++) {
    let pivot = k;
    for (let row = k + 1; row < size; row++) if (Math.abs(at(row, k)) > Math.abs(at(pivot, k))) pivot = row;
    if (at(pivot, k) === 0) throw new RangeError('the equations have no single solution');
    if (pivot !== k) {
      for (let column = k; column < size; column++) {
        const held = at(k, column);
        matrix[k * size + column] = at(pivot, column);
        matrix[pivot * size + column] = held;
      }
      [right[k], right[pivot]] = [right[pivot]!, right[k]!];
    }
    for (let row = k + 1; row < size; row++) {
      const factor = at(row, k) / at(k, k);
      if (factor === 0) continue;
      for (let column = k + 1; column < size; column++) matrix[row * size + column]! -= factor * at(k, column);
      right[row]! -= factor * right[k]!;
    }
  }
  for (let k = size - 1; k >= 0; k--) {
    let sum = right[k]!;
    for (let column = k + 1; column < size; column++) sum -= at(k, column) * right[column]!;
    right[k] = sum / at(k, k);
  }
  return right;
}
