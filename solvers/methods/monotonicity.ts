import type { Method } from '../core/types';
import { electrodeData, mapUnfit } from './direct/electrode-data';
import { boundedResidual } from './direct/full-residual';
import { largestTestValues, passedTests } from './direct/indicators';
import { signedImage } from './direct/signed-image';
import { signedParts, type MapPart } from './direct/signed-parts';
import { testRegions, type TestRegions } from './direct/test-regions';
import { defineMethod, defineParameters, readParameters, type ParametersOf } from './parameters';
import { makeReconstructor } from './reconstructor';

const specs = {
  image: {
    kind: 'choice', label: 'Image', default: 'graded',
    choices: [{ value: 'graded', label: 'largest contrast that passes' }, { value: 'marked', label: 'regions that pass the test' }],
    help: 'Graded: in each cell the largest test value that its region passes, less what the noise alone lets pass. Marked: 1 in every region that passes at the tested contrast; it marks nothing where conductive and resistive changes hide each other.',
  },
  testedContrast: { kind: 'number', label: 'Tested contrast', symbol: 'c', default: 1.5, minimum: 0.01, maximum: 100, scale: 'log', help: 'For the marked image. Change over the background that a region is tested for. Regions inside a change of at least this contrast pass; a smaller value passes more regions around it. For less conductivity the resistivity is meant.' },
  testRadius: { kind: 'number', label: 'Test radius', symbol: '\\rho', unit: 'body radii', default: 0.12, minimum: 0, maximum: 0.5, scale: 'linear', help: 'Radius of the round region tested about each cell; 0 tests single cells, which hardly weigh against the noise.' },
  safetyFactor: { kind: 'number', label: 'Safety factor', symbol: '\\tau', default: 1, minimum: 0, maximum: 10, scale: 'linear', help: 'The bound is this times the expected spectral norm of the noise. The method is told the noise.' },
  smallestShare: { kind: 'number', label: 'Smallest share', symbol: '\\epsilon', default: 1e-4, minimum: 1e-10, maximum: 0.1, scale: 'log', help: 'The bound is at least this share of the largest eigenvalue: smaller ones hold the error of the model. At least 0.003 where driven electrodes are not measured.' },
} as const;
const { schema, fields } = defineParameters(specs);

/** Linearised monotonicity test. */
const method: Method<ParametersOf<typeof specs>> = {
  key: 'monotonicity',
  name: 'Monotonicity test',
  class: 'direct',
  summary: 'More conductivity lowers all voltages in the sense of quadratic forms. A region is marked where lowering them by its own sensitivity, times a tested contrast, still leaves the data above it, to within a bound of the noise, unless the bound alone would let it pass. The test locates the change; its size is the one number that fits the data best, apart for more and for less conductivity. Where a phantom has both there is no guarantee.',
  formula: '\\text{mark } B \\iff \\beta\\,S_B \\preceq V + \\delta I \\ \\text{and not}\\ \\beta\\,S_B \\preceq \\delta I,\\quad V=\\pm(R_{x_b}-R_x),\\quad (S_B)_{ij}=\\int_B\\nabla u_i\\cdot\\nabla u_j,\\quad \\beta=\\frac{c}{1+c}\\,x_b,\\quad \\delta=\\max(\\tau\\,\\mathrm E\\|N\\|,\\ \\epsilon\\|V\\|)',
  sources: [
    { short: 'Tamburrino and Rubinacci 2002', full: 'A. Tamburrino, G. Rubinacci: A new non-iterative inversion method for electrical resistance tomography. Inverse Problems 18 (2002) 1809-1829.', fromMemory: true },
    { short: 'Harrach and Ullrich 2013', full: 'B. Harrach, M. Ullrich: Monotonicity-based shape reconstruction in electrical impedance tomography. SIAM Journal on Mathematical Analysis 45 (2013) 3382-3403 (the linearised test). The graded image takes the largest value that passes, after B. Harrach, M. N. Minh: Enhancing residual-based techniques with shape reconstruction features in electrical impedance tomography. Inverse Problems 32 (2016) 125002.', fromMemory: true },
    { short: 'Harrach 2015', full: 'B. Harrach: Interpolation of missing electrode data in electrical impedance tomography. Inverse Problems 31 (2015) 115008 (where the driven electrodes are not measured their voltages are predicted this way).', fromMemory: true },
  ],
  parameters: schema,
  fields,
  capabilities: { linear: false, nonlinear: true, direct: true, statistical: false, families: ['electrical-impedance'], dataKinds: ['difference', 'absolute'], rules: [] },
  defaultRule: null,
  fixedValue: null,
  unfit: mapUnfit,
  prepare(problem, parameters, rule) {
    const { image, testedContrast, testRadius, safetyFactor, smallestShare } = readParameters(method.name, schema, parameters);
    if (rule) throw new RangeError(`${method.name} has no parameter-choice rule: its bound follows the noise by itself.`);
    const data = electrodeData(problem);
    const background = problem.background()[0];
    const regions = testRegions(data, testRadius * data.problem.geometry.body.radius);
    const sizes = largestEigenvalues(regions);
    // More conductivity: R_b - R_x >= integral over B of (x_b / x)(x - x_b)|grad u|^2, so beta = x_b c / (1 + c) inside. Less, by the same
    // factor of resistivity: R_x - R_b >= integral of (x_b - x)|grad u|^2 with x_b - x = x_b c / (1 + c), the same beta.
    const beta = (background * testedContrast) / (1 + testedContrast);
    const indicator = (part: MapPart | null): Float64Array | null => {
      if (!part) return null;
      const out = image === 'marked' ? markedCells(part, regions, sizes, beta) : gradedCells(part, regions, sizes, background);
      return out.some((value) => value > 0) ? out : null;
    };
    return makeReconstructor((frame, noise) => {
      const change = data.change(frame);
      const parts = signedParts(data.relativeMap(change, noise), data.size, (norm) => data.uncertainty(norm, noise, safetyFactor, smallestShare));
      const x = signedImage(data, change, indicator(parts.more), indicator(parts.less));
      return { x, parameter: null, iterations: 0, forwardSolves: 1, stop: 'direct', residualNorm: boundedResidual(problem, x, frame) };
    });
  },
};

/** Largest eigenvalue of each region's matrix: what the bound alone lets pass is beta <= floor over it. */
function largestEigenvalues(regions: TestRegions): Float64Array {
  const { factors } = regions;
  const { size } = factors;
  const vectors = new Float64Array(size * size);
  for (let k = 0; k < size; k++) vectors[k * size + k] = 1;
  const identity: MapPart = { size, values: new Float64Array(size), vectors, floor: 1 };
  return largestTestValues(identity, factors, Infinity).map((value) => 1 / value);
}

function markedCells(part: MapPart, regions: TestRegions, sizes: Float64Array, beta: number): Float64Array {
  const passed = passedTests(part, regions.factors, beta);
  const out = new Float64Array(passed.length);
  for (let c = 0; c < out.length; c++) {
    if (passed[c] === 0 || beta * sizes[c] <= part.floor) continue;
    for (let m = regions.starts[c]; m < regions.starts[c + 1]; m++) out[regions.members[m]] = 1;
  }
  return out;
}

/** In backgrounds. A value beyond the background itself would mean an infinite contrast; it still ranks the cells. */
function gradedCells(part: MapPart, regions: TestRegions, sizes: Float64Array, background: number): Float64Array {
  return largestTestValues(part, regions.factors, Infinity).map((value, c) => Math.max(0, value - part.floor / sizes[c]) / background);
}

export const monotonicityMethod = defineMethod(method);
