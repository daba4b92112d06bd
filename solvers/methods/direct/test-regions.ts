import type { ElectrodeData } from './electrode-data';
import { semidefiniteFactors, type SemidefiniteFactors } from './semidefinite-factors';

/** Sensitivity matrices of regions of cells, factorised, and the cells of each. */
export interface TestRegions {
  readonly factors: SemidefiniteFactors;
  /** Cells of region c: members[starts[c]] ... */
  readonly starts: Int32Array;
  readonly members: Int32Array;
}

/**
 * One region around each cell: the cells whose centres lie within `radius` (m) of its own; the cell alone for 0.
 * Cost: cells x members x size^2 / 2 operations.
 */
export function testRegions(data: ElectrodeData, radius: number): TestRegions {
  const { problem, size } = data;
  const { cellCentres, unknowns } = problem;
  const sensitivities = data.sensitivities();
  const half = (size * (size + 1)) / 2;
  // Cell by cell, lower triangles.
  const byCell = new Float64Array(unknowns * half);
  for (let a = 0, at = 0; a < size; a++) for (let b = 0; b <= a; b++, at++) for (let c = 0; c < unknowns; c++) byCell[c * half + at] = sensitivities[(a * size + b) * unknowns + c];
  const starts = new Int32Array(unknowns + 1);
  const members: number[] = [];
  for (let c = 0; c < unknowns; c++) {
    for (let k = 0; k < unknowns; k++) {
      const dx = cellCentres[2 * c] - cellCentres[2 * k];
      const dy = cellCentres[2 * c + 1] - cellCentres[2 * k + 1];
      if (k === c || dx * dx + dy * dy < radius * radius) members.push(k);
    }
    starts[c + 1] = members.length;
  }
  const sum = new Float64Array(half);
  const factors = semidefiniteFactors(unknowns, size, (c, matrix) => {
    sum.fill(0);
    for (let m = starts[c]; m < starts[c + 1]; m++) {
      const from = members[m] * half;
      for (let at = 0; at < half; at++) sum[at] += byCell[from + at];
    }
    for (let a = 0, at = 0; a < size; a++) for (let b = 0; b <= a; b++, at++) matrix[a * size + b] = sum[at];
  });
  return { factors, starts, members: Int32Array.from(members) };
}
