import type { IntegralEquationGeometry } from '../../../shared/domain/geometry/integral-equation';
import { limits } from '../../../shared/domain/limits';
import { evaluationGrid } from '../../core/grid';
import { matrixOperator } from '../../core/matrix-operator';
import type { EvaluationGrid } from '../../core/types';
import { requireVector } from '../../core/vector';
import { truthOnGrid } from '../../truth/truth-on-grid';
import type { InversionProblem } from '../problem-family';
import type { IntegralEquation } from './equation';
import { equationOf } from './equations';
import { lineJumps, linePenalty } from './line-penalty';

/** Midpoints a cell in the integral of the kernel. */
const samples = 8;

/** Places of the data: midpoints of equal parts of the interval. */
export function dataPoints({ dataFrom, dataTo }: IntegralEquation, points: number): Float64Array {
  return Float64Array.from({ length: points }, (_, i) => dataFrom + ((i + 0.5) / points) * (dataTo - dataFrom));
}

/** One pixel a cell. */
export function lineGrid(geometry: IntegralEquationGeometry): EvaluationGrid {
  const { from, to } = equationOf(geometry);
  return evaluationGrid({ nx: geometry.cells, ny: 1, xMin: from, xMax: to, yMin: 0, yMax: 1, body: { kind: 'interval', from, to } });
}

/**
 * The model that inverts: the unknown constant on each cell, the kernel integrated over each cell by the midpoint rule on eight parts
 * of it (Galerkin's method with box functions, collocated at the data points).
 * @returns points x cells, row-major
 */
export function equationMatrix(equation: IntegralEquation, points: number, cells: number): Float64Array {
  const s = dataPoints(equation, points);
  const { from, to } = equation;
  const step = (to - from) / (cells * samples);
  const values = new Float64Array(points * cells);
  for (let i = 0; i < points; i++)
    for (let j = 0; j < cells; j++) {
      let sum = 0;
      for (let q = 0; q < samples; q++) sum += equation.kernel(s[i], from + (j * samples + q + 0.5) * step);
      values[i * cells + j] = sum * step;
    }
  return values;
}

/** @param background value outside which nothing is known, constant */
export function createEquationInversion(geometry: IntegralEquationGeometry, background: number): InversionProblem {
  if (!(Math.abs(background) <= limits.plainValueMax)) throw new RangeError(`The background must lie between ${-limits.plainValueMax} and ${limits.plainValueMax}, not be ${background}.`);
  const { cells, points } = geometry;
  const equation = equationOf(geometry);
  const grid = lineGrid(geometry);
  const h = (equation.to - equation.from) / cells;
  const operator = matrixOperator(equationMatrix(equation, points, cells), points, cells);
  const evaluate = (x: Float64Array): Float64Array => {
    requireVector(x, cells, 'The vector of cell values');
    const data = new Float64Array(points);
    operator.apply(x, data);
    return data;
  };
  return {
    family: 'integral-equation',
    geometry,
    dataKind: 'absolute',
    dataSize: points,
    unknowns: cells,
    unknownWeights: new Float64Array(cells).fill(h),
    grid,
    unit: '',
    lowerBound: -Infinity,
    nodes: cells,
    linear: true,
    background: () => new Float64Array(cells).fill(background),
    frameOf: evaluate,
    evaluate,
    linearise: () => operator,
    toImage: (x, out) => out.set(x),
    penalty: (kind) => linePenalty(kind, cells, h),
    jumps: () => lineJumps(cells),
    project: (truth) => truthOnGrid(truth, grid),
  };
}
