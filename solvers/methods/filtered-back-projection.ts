import type { XrayGeometry } from '../../shared/domain/geometry/x-ray';
import type { ForwardProblem, Method, Reconstruction } from '../core/types';
import { norm2, requireVector } from '../core/vector';
import { xrayCells } from '../problems/x-ray/system-matrix';
import { defineField, defineMethod, defineParameters, readParameters, readRule, type ParametersOf } from './parameters';
import { filteredProjection, pointsPerSide, type FilteredProjection } from './projection/filtered-projection';
import { makeReconstructor } from './reconstructor';

const specs = {
  window: {
    kind: 'choice', label: 'Window', default: 'shepp-logan',
    choices: [{ value: 'ram-lak', label: 'None (Ram-Lak)' }, { value: 'shepp-logan', label: 'Shepp-Logan' }, { value: 'hann', label: 'Hann' }],
    help: 'What the ramp filter is multiplied with: nothing, a sinc, or a raised cosine that ends at the cut-off. The later ones damp noise and detail more.',
  },
} as const;
const { schema, fields } = defineParameters(specs);

/** Cut-offs that the discrepancy principle tries, from the lowest. */
const triedCutoffs = 16;

/** Points (x, y pairs, m) of all cells, `perCell` one after the other for each cell. */
function cellPoints(geometry: XrayGeometry): { points: Float64Array; perCell: number } {
  const grid = xrayCells(geometry);
  const side = pointsPerSide(grid.dx, geometry.detectorSpacing);
  const perCell = side * side;
  const points = new Float64Array(2 * perCell * grid.inside.length);
  let at = 0;
  for (const cell of grid.inside)
    for (let k = 0; k < perCell; k++) {
      points[at++] = grid.xMin + ((cell % grid.nx) + ((k % side) + 0.5) / side) * grid.dx;
      points[at++] = grid.yMin + (Math.floor(cell / grid.nx) + (Math.floor(k / side) + 0.5) / side) * grid.dy;
    }
  return { points, perCell };
}

/** @throws RangeError for a problem of another family */
function xrayGeometry(problem: ForwardProblem): XrayGeometry {
  if (problem.family !== 'x-ray') throw new RangeError(`Filtered back-projection needs line integrals, not data of the family '${problem.family}'.`);
  return problem.geometry as XrayGeometry;
}

/** Convolution with a windowed ramp, then back-projection. */
const method: Method<ParametersOf<typeof specs>> = {
  key: 'filtered-back-projection',
  name: 'Filtered back-projection',
  class: 'direct',
  summary: 'The inversion formula of the Radon transform, cut off at a frequency: each view is convolved with a windowed ramp and spread back along its rays. Missing angles count as zero; lines seen from both sides are shared.',
  formula: '\\hat x(r) = x_b + \\int w(\\theta, s)\\, (q * h_c)(\\theta, \\langle r, e_\\theta\\rangle)\\, d\\theta, \\quad q = y - F(x_b), \\; \\hat h_c(\\omega) = |\\omega|\\, W(\\omega/\\omega_c)',
  sources: [
    { short: 'Kak and Slaney 1988', full: 'A. C. Kak, M. Slaney: Principles of Computerized Tomographic Imaging. IEEE Press, 1988 (chapter 3).', fromMemory: true },
    { short: 'Shepp and Logan 1974', full: 'L. A. Shepp, B. F. Logan: The Fourier reconstruction of a head section. IEEE Transactions on Nuclear Science 21 (1974) 21-43.', fromMemory: true },
    { short: 'Parker 1982', full: 'D. L. Parker: Optimal short scan convolution reconstruction for fan beam CT. Medical Physics 9 (1982) 254-257.', fromMemory: true },
  ],
  parameters: schema,
  fields,
  capabilities: { linear: true, nonlinear: false, direct: true, statistical: false, families: ['x-ray'], dataKinds: ['absolute'], rules: ['fixed', 'discrepancy'] },
  defaultRule: { key: 'discrepancy', safetyFactor: 1.05 },
  fixedValue: defineField('value', { kind: 'number', label: 'Cut-off', symbol: '\\omega_c', default: 0.8, minimum: 0.02, maximum: 1, scale: 'linear', help: 'Highest frequency kept, as a share of what the spacing of the detector cells resolves.' }),
  prepare(problem, parameters, rule) {
    const { window } = readParameters(method.name, schema, parameters);
    const setting = readRule(method, rule);
    const geometry = xrayGeometry(problem);
    const { dataSize, unknowns } = problem;
    const background = problem.background();
    const offset = problem.evaluate(background);
    const operator = problem.linearise(background);
    const { points, perCell } = cellPoints(geometry);
    const made = new Map<number, FilteredProjection>();
    const projection = (cutoff: number): FilteredProjection => {
      let one = made.get(cutoff);
      if (!one) made.set(cutoff, (one = filteredProjection(geometry, window, cutoff)));
      return one;
    };
    const model = new Float64Array(dataSize);
    const reconstructAt = (y: Float64Array, cutoff: number): { h: Float64Array; residualNorm: number } => {
      const values = projection(cutoff).at(y, points);
      const h = new Float64Array(unknowns);
      for (let j = 0; j < unknowns; j++) {
        let sum = 0;
        for (let k = 0; k < perCell; k++) sum += values[j * perCell + k];
        h[j] = sum / perCell;
      }
      operator.apply(h, model);
      for (let i = 0; i < dataSize; i++) model[i] = y[i] - model[i];
      return { h, residualNorm: norm2(model) };
    };
    return makeReconstructor((data, noise): Reconstruction => {
      requireVector(data, dataSize, 'The data frame');
      const y = data.map((value, i) => value - offset[i]);
      const size = norm2(y);
      const target = setting.key === 'discrepancy' ? setting.safetyFactor * noise.norm : 0;
      if (size === 0 || size <= target) return { x: background.slice(), parameter: null, iterations: 0, forwardSolves: 0, stop: 'direct', residualNorm: size };
      let cutoff = setting.key === 'fixed' ? setting.value : 1 / triedCutoffs;
      let best = reconstructAt(y, cutoff);
      // The lowest cut-off that fits the data; where none does, the one that fits best.
      for (let k = 2; setting.key === 'discrepancy' && k <= triedCutoffs && best.residualNorm > target; k++) {
        const next = reconstructAt(y, k / triedCutoffs);
        if (next.residualNorm < best.residualNorm) {
          best = next;
          cutoff = k / triedCutoffs;
        }
      }
      for (let j = 0; j < unknowns; j++) best.h[j] += background[j];
      return { x: best.h, parameter: cutoff, iterations: 0, forwardSolves: 0, stop: 'direct', residualNorm: best.residualNorm };
    });
  },
};
export const filteredBackProjectionMethod = defineMethod(method);
