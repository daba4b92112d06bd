import { limits } from '../../../shared/domain/limits';
import type { XrayGeometry } from '../../../shared/domain/geometry/x-ray';
import { createEvaluationGrid } from '../../core/grid';
import { applySparse, applySparseTransposed } from '../../core/sparse';
import type { Derivative } from '../../core/types';
import { requireVector } from '../../core/vector';
import { pixelShares, projectOnPixels } from '../pixel-grid/pixel-image';
import { pixelJumps, pixelPenalty } from '../pixel-grid/pixel-penalty';
import type { InversionProblem } from '../problem-family';
import { systemMatrix, xrayCells, xrayEvaluationSide } from './system-matrix';

/**
 * The forward problem of an inversion: attenuation constant on square cells, line integrals by exact lengths (Siddon 1985), the adjoint its
 * transpose. Outside the disc the attenuation is 0.
 * @param background 1/m
 * @throws RangeError for a background that is not finite, or a geometry whose matrix is too large
 */
export function createXrayInversion(geometry: XrayGeometry, background: number): InversionProblem {
  if (!(Math.abs(background) <= limits.plainValueMax)) throw new RangeError(`The background must lie between ${-limits.plainValueMax} and ${limits.plainValueMax} 1/m, not be ${background}.`);
  const cells = xrayCells(geometry);
  const grid = createEvaluationGrid(geometry.body.radius, xrayEvaluationSide(geometry));
  const shares = pixelShares(cells, grid);
  const sparse = systemMatrix(geometry, cells);
  const { rows, cols } = sparse;
  const derivative: Derivative = {
    rows, cols, sparse,
    apply: (x, out) => applySparse(sparse, x, out),
    applyAdjoint: (y, out) => applySparseTransposed(sparse, y, out),
  };
  const evaluate = (x: Float64Array): Float64Array => {
    requireVector(x, cols, 'The vector of attenuations');
    const out = new Float64Array(rows);
    applySparse(sparse, x, out);
    return out;
  };
  return {
    family: 'x-ray', geometry, dataKind: 'absolute', dataSize: rows, unknowns: cols, unknownWeights: cells.weights, grid, unit: '1/m',
    // An attenuation is not negative; a difference of two may be, and says so by its background.
    lowerBound: background < 0 ? -Infinity : 0,
    nodes: cols,
    background: () => new Float64Array(cols).fill(background),
    evaluate, frameOf: evaluate, linear: true,
    linearise: () => derivative,
    toImage: (x, out) => applySparse(shares, x, out),
    penalty: (kind) => pixelPenalty(cells, kind),
    jumps: () => pixelJumps(cells),
    project: (truth) => projectOnPixels(truth, cells),
  };
}
