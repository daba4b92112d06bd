/**
 * One-to-one assignment of rows to columns with the least total cost (Kuhn 1955; shortest augmenting paths after Jonker and
 * Volgenant 1987). Cost: O(rows^2 cols).
 * @param cost rows x cols, row-major, rows <= cols, finite
 * @returns for each row its column
 */
export function assign(cost: Float64Array, rows: number, cols: number): Int32Array {
  if (rows > cols) throw new RangeError(`${rows} rows cannot be assigned one to one to ${cols} columns.`);
  // Potentials and columns are counted from 1; column 0 stands for the row being inserted.
  const u = new Float64Array(rows + 1);
  const v = new Float64Array(cols + 1);
  const rowOf = new Int32Array(cols + 1);
  const previous = new Int32Array(cols + 1);
  for (let row = 1; row <= rows; row++) {
    rowOf[0] = row;
    let column = 0;
    const shortest = new Float64Array(cols + 1).fill(Infinity);
    const done = new Uint8Array(cols + 1);
    do {
      done[column] = 1;
      const from = rowOf[column];
      let step = Infinity;
      let nextColumn = 0;
      for (let j = 1; j <= cols; j++) {
        if (done[j]) continue;
        const reduced = cost[(from - 1) * cols + j - 1] - u[from] - v[j];
        if (reduced < shortest[j]) {
          shortest[j] = reduced;
          previous[j] = column;
        }
        if (shortest[j] < step) {
          step = shortest[j];
          nextColumn = j;
        }
      }
      for (let j = 0; j <= cols; j++)
        if (done[j]) {
          u[rowOf[j]] += step;
          v[j] -= step;
        } else shortest[j] -= step;
      column = nextColumn;
    } while (rowOf[column] !== 0);
    do {
      const back = previous[column];
      rowOf[column] = rowOf[back];
      column = back;
    } while (column !== 0);
  }
  const columnOf = new Int32Array(rows);
  for (let j = 1; j <= cols; j++) if (rowOf[j] > 0) columnOf[rowOf[j] - 1] = j - 1;
  return columnOf;
}
