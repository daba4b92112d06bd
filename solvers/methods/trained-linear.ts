import { denseMatrix } from '../core/matrix-operator';
import { exp } from '../core/math';
import type { Method } from '../core/types';
import { requireVector, norm2 } from '../core/vector';
import { denseCholesky } from '../linear-algebra/dense-cholesky';
import { matmulTransposed, transpose, matmul } from '../linear-algebra/matrix-product';
import { unknownPlaces } from './cell-image';
import { largestSingularValue } from './nonlinear/linearisation';
import { defineField, defineMethod, defineParameters, readParameters, readRule, type ParametersOf } from './parameters';
import { makeReconstructor } from './reconstructor';
import { methodStream } from './statistical/prior';

const specs = {
  targets: { kind: 'integer', label: 'Training targets', symbol: 'N', default: 800, minimum: 50, maximum: 5000, help: 'Small targets at random places, evenly spread over the body.' },
  targetRadius: { kind: 'number', label: 'Target radius', unit: 'body radius', default: 0.05, minimum: 0.01, maximum: 0.5, scale: 'log', help: 'Radius of a training target, as a share of the body radius.' },
  responseRadius: { kind: 'number', label: 'Response radius', unit: 'body radius', default: 0.18, minimum: 0.02, maximum: 0.8, scale: 'log', help: 'Radius of the round spot that a target is to give in the image. Smaller is sharper and noisier.' },
  edge: { kind: 'number', label: 'Edge of the response', unit: 'response radius', default: 0.3, minimum: 0.05, maximum: 1, scale: 'log', help: 'Width over which the wanted spot falls from one to nought.' },
} as const;
const { schema, fields } = defineParameters(specs);

/** More data than this make the matrix of the fit too slow. */
const largestData = 1500;

/** A spot of unit height at distance d of its centre: flat inside, with a logistic edge. */
const spot = (d: number, radius: number, edge: number): number => 1 / (1 + exp((d - radius) / (0.2 * edge * radius)));

/** A matrix fitted to simulated targets with a desired point response. */
const method: Method<ParametersOf<typeof specs>> = {
  key: 'trained-linear',
  name: 'Linear reconstruction trained on targets',
  class: 'direct',
  summary: 'One matrix, fitted so that simulated small targets give round spots of one size and of their own amount, wherever they are, with noise weighed against resolution by one number.',
  formula: 'R = \\sum_t d_t y_t^{\\mathsf T} \\Bigl( \\sum_t y_t y_t^{\\mathsf T} + \\lambda^2 \\mu_1 I \\Bigr)^{-1}, \\quad y_t = J h_t, \\quad \\hat x = x_b + R\\,(y - F(x_b))',
  sources: [{ short: 'Adler et al. 2009', full: 'A. Adler et al.: a unified approach to linear image reconstruction with a desired point response, Physiological Measurement 30 (2009) S35-S55.', fromMemory: true }],
  parameters: schema,
  fields,
  capabilities: { linear: true, nonlinear: false, direct: true, statistical: false, families: ['electrical-impedance', 'x-ray', 'deblurring'], dataKinds: ['difference', 'absolute'], rules: ['fixed'] },
  defaultRule: { key: 'fixed', value: 0.003 },
  fixedValue: defineField('value', { kind: 'number', label: 'Noise weight', symbol: '\\lambda', default: 0.003, minimum: 1e-8, maximum: 10, scale: 'log', help: 'Deviation of the noise trained against, over the root of the largest eigenvalue of the training data.' }),
  unfit: ({ dataSize, unknowns }) => (dataSize > largestData || dataSize * unknowns > 8e6 ? `the fit solves a dense system in the data: at most ${largestData} of them and 8 million entries of the derivative, not ${dataSize} x ${unknowns}.` : null),
  prepare(problem, parameters, rule) {
    const { targets, targetRadius, responseRadius, edge } = readParameters(method.name, schema, parameters);
    const setting = readRule(method, rule);
    const weight = setting.key === 'fixed' ? setting.value : 0;
    const { dataSize: m, unknowns: n, grid, unknownWeights } = problem;
    const background = problem.background();
    const jacobian = denseMatrix(problem.linearise(background));
    requireVector(jacobian, m * n, 'The derivative');
    const places = unknownPlaces(problem);
    const R = grid.bodyRadius;
    const stepX = (grid.xMax - grid.xMin) / grid.nx;
    const stepY = (grid.yMax - grid.yMin) / grid.ny;
    const random = methodStream('training targets');
    const shapes = new Float64Array(targets * n);
    const wanted = new Float64Array(targets * n);
    for (let t = 0; t < targets; t++) {
      // A random place of a random pixel of the body.
      const pixel = grid.inside[random.nextIndex(grid.inside.length)];
      const column = pixel % grid.nx;
      const x = grid.xMin + (column + random.nextUniform()) * stepX;
      const y = grid.yMin + ((pixel - column) / grid.nx + random.nextUniform()) * stepY;
      fill(shapes, t, x, y, targetRadius * R, 0.3);
      fill(wanted, t, x, y, responseRadius * R, edge);
    }
    /** A spot whose integral over the unknowns is one: amounts are kept, near the edge of the body too. */
    function fill(out: Float64Array, t: number, x: number, y: number, radius: number, softness: number): void {
      let amount = 0;
      let nearest = 0;
      let least = Infinity;
      for (let j = 0; j < n; j++) {
        const dx = places[2 * j] - x;
        const dy = places[2 * j + 1] - y;
        const d = Math.sqrt(dx * dx + dy * dy);
        if (d < least) {
          least = d;
          nearest = j;
        }
        const value = d < 6 * radius ? spot(d, radius, softness) : 0;
        out[t * n + j] = value;
        amount += value * unknownWeights[j];
      }
      if (!(amount > 1e-9 * unknownWeights[nearest])) {
        // Smaller than a cell: the cell that holds it.
        out[t * n + nearest] = 1;
        amount = unknownWeights[nearest];
      }
      for (let j = 0; j < n; j++) out[t * n + j] /= amount;
    }
    const data = transpose(matmulTransposed(shapes, jacobian, targets, n, m), targets, m);
    const gram = matmulTransposed(data, data, m, targets, m);
    const top = largestSingularValue(gram, m);
    const largest = top * top;
    if (!(largest > 0)) throw new RangeError('The derivative at the background is zero: these data do not depend on the unknowns.');
    for (let i = 0; i < m; i++) gram[i * m + i] += weight * weight * largest;
    // matrix^T = (Y Y^T + ...)^{-1} Y D^T: the columns of Y D^T are right-hand sides.
    const matrix = transpose(matmul(data, wanted, m, targets, n), m, n);
    denseCholesky(gram, m).solveMany(matrix, n);
    const offset = problem.dataKind === 'difference' ? new Float64Array(m) : problem.evaluate(background);

    return makeReconstructor((frame) => {
      requireVector(frame, m, 'The data frame');
      const y = frame.map((value, i) => value - offset[i]);
      const x = new Float64Array(n);
      for (let j = 0; j < n; j++) {
        let sum = 0;
        for (let i = 0; i < m; i++) sum += matrix[j * m + i] * y[i];
        x[j] = sum;
      }
      const residual = y.map((value, i) => {
        let sum = 0;
        for (let j = 0; j < n; j++) sum += jacobian[i * n + j] * x[j];
        return value - sum;
      });
      for (let j = 0; j < n; j++) x[j] += background[j];
      return { x, parameter: weight, iterations: 0, forwardSolves: 0, stop: 'direct', residualNorm: norm2(residual) };
    });
  },
};

export const trainedLinearMethod = defineMethod(method);
