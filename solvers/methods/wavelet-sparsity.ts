import { applySparse, applySparseTransposed } from '../core/sparse';
import type { ForwardProblem, LinearOperator, Method } from '../core/types';
import { requireVector } from '../core/vector';
import { cellsOfImage } from './cell-image';
import { defineField, defineMethod, defineParameters, readParameters, readRule, type ParametersOf } from './parameters';
import { acceleratedGradient, operatorNormSquare } from './proximal/accelerated-gradient';
import { waveletTransform, type WaveletTransform } from './proximal/wavelets';
import { makeReconstructor } from './reconstructor';

const specs = {
  wavelet: { kind: 'choice', label: 'Wavelet', default: 'haar', choices: [{ value: 'haar', label: 'Haar' }, { value: 'daubechies', label: 'Daubechies, two vanishing moments' }], help: 'The basis in which the change is sparse. Haar favours flat regions, the other one smooth ramps.' },
  decay: { kind: 'number', label: 'Decay', symbol: 'q', default: 0.5, minimum: 0.1, maximum: 0.95, scale: 'linear', help: 'Under the discrepancy principle the weight is multiplied by this from stage to stage until the data are fitted.' },
  largestIteration: { kind: 'integer', label: 'Most iterations of a stage', default: 60, minimum: 5, maximum: 5000, help: 'Steps at one weight. A stage ends earlier when the image no longer changes.' },
} as const;
const { schema, fields } = defineParameters(specs);

const powerOfTwo = (n: number): number => {
  let side = 1;
  while (side < n) side *= 2;
  return side;
};

/** Coefficients to data: an image from the wavelets, its averages on the cells, the derivative. */
function waveletOperator(problem: ForwardProblem, transform: WaveletTransform): LinearOperator & { toUnknowns(z: Float64Array, h: Float64Array): void } {
  const { grid } = problem;
  const derivative = problem.linearise(problem.background());
  const cells = cellsOfImage(problem);
  const full = new Float64Array(transform.nx * transform.ny);
  const inside = new Float64Array(grid.inside.length);
  const h = new Float64Array(problem.unknowns);
  const place = Int32Array.from(grid.inside, (pixel) => Math.floor(pixel / grid.nx) * transform.nx + (pixel % grid.nx));
  const toUnknowns = (z: Float64Array, out: Float64Array): void => {
    full.set(z);
    transform.inverse(full);
    for (let k = 0; k < place.length; k++) inside[k] = full[place[k]];
    applySparse(cells, inside, out);
  };
  return {
    rows: problem.dataSize,
    cols: full.length,
    toUnknowns,
    apply(z, out) {
      toUnknowns(z, h);
      derivative.apply(h, out);
    },
    applyAdjoint(y, out) {
      derivative.applyAdjoint(y, h);
      applySparseTransposed(cells, h, inside);
      out.fill(0);
      for (let k = 0; k < place.length; k++) out[place[k]] = inside[k];
      // The transform is orthonormal: its adjoint is its inverse.
      transform.forward(out);
    },
  };
}

/** Sparsity of the change in a wavelet basis. */
const method: Method<ParametersOf<typeof specs>> = {
  key: 'wavelet-sparsity',
  name: 'Sparsity in a wavelet basis',
  class: 'variational',
  summary: 'Favours changes with few wavelets: penalises the sum of the absolute values of the coefficients, on the linearised problem, by accelerated soft thresholding.',
  formula: '\\hat x = x_b + W \\operatorname*{arg\\,min}_z\\; \\tfrac12 \\|J W z - (y - F(x_b))\\|^2 + \\lambda \\sum_{i \\notin \\mathrm{coarse}} |z_i|',
  sources: [
    { short: 'Beck and Teboulle 2009', full: 'A. Beck, M. Teboulle: A fast iterative shrinkage-thresholding algorithm for linear inverse problems. SIAM Journal on Imaging Sciences 2 (2009) 183-202.', fromMemory: true },
    { short: 'Daubechies, Defrise, De Mol 2004', full: 'I. Daubechies, M. Defrise, C. De Mol: An iterative thresholding algorithm for linear inverse problems with a sparsity constraint. Communications on Pure and Applied Mathematics 57 (2004) 1413-1457.', fromMemory: true },
  ],
  parameters: schema,
  fields,
  capabilities: { linear: false, nonlinear: false, direct: false, statistical: false, families: ['electrical-impedance', 'x-ray', 'integral-equation', 'deblurring'], dataKinds: ['difference', 'absolute'], rules: ['discrepancy', 'fixed'] },
  defaultRule: { key: 'discrepancy', safetyFactor: 1.05 },
  fixedValue: defineField('value', { kind: 'number', label: 'Lambda', symbol: '\\lambda', default: 1e-3, minimum: 1e-10, maximum: 1, scale: 'log', help: 'Weight over the largest one that leaves any wavelet at all.' }),
  prepare(problem, parameters, rule) {
    const { wavelet, decay, largestIteration } = readParameters(method.name, schema, parameters);
    const setting = readRule(method, rule);
    const { grid } = problem;
    const transform = waveletTransform(powerOfTwo(grid.nx), powerOfTwo(grid.ny), wavelet);
    const operator = waveletOperator(problem, transform);
    const normSquare = operatorNormSquare(operator);
    const background = problem.background();
    const offset = problem.dataKind === 'difference' ? new Float64Array(problem.dataSize) : problem.evaluate(background);
    const { nx, ny, coarseX, coarseY } = transform;
    const prox = (z: Float64Array, threshold: number): void => {
      for (let i = 0; i < ny; i++)
        for (let j = 0; j < nx; j++) {
          if (i < coarseY && j < coarseX) continue;
          const k = i * nx + j;
          z[k] = z[k] > threshold ? z[k] - threshold : z[k] < -threshold ? z[k] + threshold : 0;
        }
    };
    return makeReconstructor((data, noise, context) => {
      requireVector(data, problem.dataSize, 'The data frame');
      const y = data.map((value, i) => value - offset[i]);
      const correlation = new Float64Array(operator.cols);
      operator.applyAdjoint(y, correlation);
      let largest = 0;
      for (let k = 0; k < correlation.length; k++) largest = Math.max(largest, Math.abs(correlation[k]));
      const target = setting.key === 'discrepancy' ? setting.safetyFactor * noise.norm : null;
      const weight = setting.key === 'fixed' ? setting.value * largest : 0.5 * largest;
      const { z, weight: last, iterations, stop, residualNorm } = acceleratedGradient(
        { operator, normSquare, prox }, y, { weight, target, decay, smallestWeight: 1e-7 * largest, limit: largestIteration }, context?.aborted,
      );
      const x = new Float64Array(problem.unknowns);
      if (iterations > 0) operator.toUnknowns(z, x);
      for (let j = 0; j < x.length; j++) x[j] += background[j];
      return { x, parameter: iterations > 0 && largest > 0 ? last / largest : null, iterations, forwardSolves: 0, stop, residualNorm };
    });
  },
};
export const waveletSparsityMethod = defineMethod(method);
