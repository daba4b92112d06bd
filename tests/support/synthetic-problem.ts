import { exp } from '../../solvers/core/math';
import type { EvaluationGrid, ForwardProblem, MatrixOperator, PenaltyKey, SparseMatrix, Target } from '../../solvers/core/types';
import type { DataKind } from '../../shared/domain/phantom-definition';
import { unitGeometry } from './impedance-case';
import type { SimulatedPhantom } from '../../solvers/campaign/trial';

export interface SyntheticOptions {
  /** Cells along each side of the square [-1, 1]^2. */
  readonly side?: number;
  readonly data?: number;
  readonly pixels?: number;
  readonly dataKind?: DataKind;
  /** Strength of the quadratic term; 0 is linear. */
  readonly curvature?: number;
  readonly backgroundValue?: number;
}

/** Disc of radius 1 m on a square of pixels. */
export function discGrid(pixels: number): EvaluationGrid {
  const mask = new Uint8Array(pixels * pixels);
  const inside: number[] = [];
  for (let row = 0; row < pixels; row++)
    for (let column = 0; column < pixels; column++) {
      const x = -1 + (2 * (column + 0.5)) / pixels;
      const y = -1 + (2 * (row + 0.5)) / pixels;
      if (x * x + y * y <= 1) {
        mask[row * pixels + column] = 1;
        inside.push(row * pixels + column);
      }
    }
  return { nx: pixels, ny: pixels, xMin: -1, xMax: 1, yMin: -1, yMax: 1, mask, inside: Int32Array.from(inside), bodyRadius: 1, body: { kind: 'disc', radius: 1 } };
}

function sparse(rows: readonly (readonly [number, number][])[], cols: number): SparseMatrix {
  const rowStart = new Int32Array(rows.length + 1);
  rows.forEach((row, i) => (rowStart[i + 1] = rowStart[i] + row.length));
  return { rows: rows.length, cols, rowStart, columns: Int32Array.from(rows.flatMap((row) => row.map(([c]) => c))), values: Float64Array.from(rows.flatMap((row) => row.map(([, v]) => v))) };
}

export function denseOperator(values: Float64Array, rows: number, cols: number): MatrixOperator {
  return {
    values, rows, cols,
    apply(x, out) {
      for (let i = 0; i < rows; i++) {
        let sum = 0;
        for (let j = 0; j < cols; j++) sum += values[i * cols + j] * x[j];
        out[i] = sum;
      }
    },
    applyAdjoint(y, out) {
      out.fill(0);
      for (let i = 0; i < rows; i++) for (let j = 0; j < cols; j++) out[j] += values[i * cols + j] * y[i];
    },
  };
}

/**
 * A smoothing problem on a square of cells: data i is t + curvature t^2 with t = sum_j w_j k(p_i, q_j) x_j, Gaussian kernels k about
 * points p_i on rings; ill-posed like an imaging problem, with an exact derivative.
 */
export function syntheticProblem(options: SyntheticOptions = {}): ForwardProblem {
  const { side = 12, data = 24, pixels = 32, dataKind = 'difference', curvature = 0, backgroundValue = 1 } = options;
  const n = side * side;
  const step = 2 / side;
  const weights = new Float64Array(n).fill(step * step);
  const kernel = new Float64Array(data * n);
  const rings = Math.max(1, Math.round(Math.sqrt(data / 8)));
  const perRing = Math.ceil(data / rings);
  for (let i = 0; i < data; i++) {
    const ring = Math.floor(i / perRing);
    const angle = (2 * Math.PI * ((i % perRing) + 0.37 * ring)) / perRing;
    const radius = 0.95 - (0.8 * ring) / rings;
    const px = radius * Math.cos(angle);
    const py = radius * Math.sin(angle);
    for (let row = 0; row < side; row++)
      for (let column = 0; column < side; column++) {
        const dx = -1 + (column + 0.5) * step - px;
        const dy = -1 + (row + 0.5) * step - py;
        kernel[i * n + row * side + column] = step * step * exp(-(dx * dx + dy * dy) / 0.12);
      }
  }
  const linear = denseOperator(kernel, data, n);
  const background = new Float64Array(n).fill(backgroundValue);
  const raw = (x: Float64Array): Float64Array => {
    const t = new Float64Array(data);
    linear.apply(x, t);
    for (let i = 0; i < data; i++) t[i] += curvature * t[i] * t[i];
    return t;
  };
  const reference = raw(background);
  const grid = discGrid(pixels);
  const cellOf = Int32Array.from(grid.inside, (pixel) => Math.floor((Math.floor(pixel / pixels) * side) / pixels) * side + Math.floor(((pixel % pixels) * side) / pixels));
  const edges: [number, number][] = [];
  for (let row = 0; row < side; row++)
    for (let column = 0; column < side; column++) {
      if (column + 1 < side) edges.push([row * side + column, row * side + column + 1]);
      if (row + 1 < side) edges.push([row * side + column, (row + 1) * side + column]);
    }
  const jumpRows = edges.map(([a, b]) => [[a, -1], [b, 1]] as [number, number][]);
  const penalty = (kind: PenaltyKey): SparseMatrix => {
    if (kind === 'identity') return sparse(Array.from({ length: n }, (_, j) => [[j, step] as [number, number]]), n);
    if (kind === 'gradient') return sparse(jumpRows, n);
    const rows = Array.from({ length: n }, () => new Map<number, number>());
    for (const [a, b] of edges)
      for (const [p, q] of [[a, b], [b, a]]) {
        rows[p].set(p, (rows[p].get(p) ?? 0) + 1 / step);
        rows[p].set(q, (rows[p].get(q) ?? 0) - 1 / step);
      }
    return sparse(rows.map((row) => [...row.entries()]), n);
  };
  return {
    family: 'electrical-impedance',
    geometry: unitGeometry({ electrodes: 8 }),
    linear: curvature === 0, dataKind, dataSize: data, unknowns: n, unknownWeights: weights, grid, unit: 'S/m', lowerBound: 0.01 * backgroundValue,
    background: () => Float64Array.from(background),
    evaluate(x) {
      const y = raw(x);
      if (dataKind === 'difference') for (let i = 0; i < data; i++) y[i] -= reference[i];
      return y;
    },
    linearise(x) {
      const t = new Float64Array(data);
      linear.apply(x, t);
      const values = Float64Array.from(kernel);
      for (let i = 0; i < data; i++) for (let j = 0; j < n; j++) values[i * n + j] *= 1 + 2 * curvature * t[i];
      return denseOperator(values, data, n);
    },
    toImage(x, out) {
      for (let k = 0; k < out.length; k++) out[k] = x[cellOf[k]];
    },
    penalty,
    jumps: () => ({ matrix: sparse(jumpRows, n), lengths: new Float64Array(edges.length).fill(step) }),
  };
}

/** A disc of contrast +1 on the problem's own cells: these tests are about the algebra, not about an inverse crime. */
export function syntheticTruth(problem: ForwardProblem, contrast = 1): { x: Float64Array; simulated: SimulatedPhantom; target: Target } {
  const x = problem.background();
  const side = Math.round(Math.sqrt(problem.unknowns));
  let area = 0;
  for (let j = 0; j < x.length; j++) {
    const cx = -1 + (2 * ((j % side) + 0.5)) / side - 0.3;
    const cy = -1 + (2 * (Math.floor(j / side) + 0.5)) / side - 0.2;
    if (cx * cx + cy * cy <= 0.3 * 0.3) {
      x[j] += contrast;
      area += problem.unknownWeights[j];
    }
  }
  const target: Target = { label: 'disc', x: 0.3, y: 0.2, area, contrast };
  const truthImage = new Float64Array(problem.grid.inside.length);
  const backgroundImage = new Float64Array(problem.grid.inside.length);
  problem.toImage(x, truthImage);
  problem.toImage(problem.background(), backgroundImage);
  const clean = problem.evaluate(x);
  let square = 0;
  for (const value of clean) square += value * value;
  return { x, target, simulated: { clean, noiseScale: Math.sqrt(square), truthImage, backgroundImage, targets: [target] } };
}
