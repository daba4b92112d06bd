import { exp } from '../core/math';
import type { Reconstruction, RuleSetting, Source } from '../core/types';
import { getMethod } from '../methods/registry';
import { digestOf, euclideanGap, largestEntry, largestGap, relativeGap, type VerificationCheck } from './check';
import { matrixProblem } from './matrix-problem';

/** A_ij = exp(-(i - j)^2 / 6), 12 x 12; data with 1 % noise. Solutions computed with numpy 1.24.2 and scipy 1.10.1. */
const n = 12;
const data: readonly number[] = [0.32745649106620317, 0.8031726526632008, 1.686849919531254, 2.6117415944918894, 3.4390333593240805, 3.753435434072831, 3.552023256288376, 2.895327847037264, 2.065261100028767, 1.3105718007299156, 0.7689043739258643, 0.30951746368124206];
/** Euclidean norm of the noise in the data. */
const noiseNorm = 0.0801866010505151;
const solutions = {
  tikhonov: [-0.0324611016239805, -0.04128066084138888, 0.2644706418737514, 0.6897860827259497, 1.0112501569845143, 1.1617795593181959, 1.0564163882487088, 0.6782931595658298, 0.32502540310520944, 0.25130372045029675, 0.2012569195416068, -0.10761840222972166],
  truncated: [-0.11065826611549655, 0.013700913483953544, 0.29521814531443125, 0.6741721134161871, 1.0068052037933548, 1.1439430244726005, 1.0268917498021364, 0.7284162781591774, 0.4014662224383216, 0.17339715946945056, 0.07333228475509848, 0.04917610150616971],
  cgls: [-0.13431256599347083, 0.004071806222881863, 0.30828963448643426, 0.6971607174312427, 1.015123544778457, 1.1274925731966603, 1.0026059053691676, 0.7233116157187264, 0.4229664338044554, 0.1985582836882805, 0.07137446331497668, 0.014133582909100322],
} as const;
const singularValues: readonly number[] = [4.031008833052514, 3.227554538602866, 2.231101462909023, 1.3337541143249065, 0.690724599484066, 0.3101824400080838, 0.12061929788182323, 0.04037283140015381, 0.011464664239603451, 0.00267940307065804, 0.00048221675874143615, 5.5598267559315766e-05];

function reconstruct(method: string, rule: RuleSetting, parameters: Record<string, number | string>): { reconstruction: Reconstruction; change: Float64Array; spectrum: Float64Array } {
  const values = Float64Array.from({ length: n * n }, (_, k) => {
    const d = Math.floor(k / n) - (k % n);
    return exp(-(d * d) / 6);
  });
  const problem = matrixProblem(values, n);
  const prepared = getMethod(method).prepare(problem, parameters, rule);
  const reconstruction = prepared.reconstruct(Float64Array.from(data), { norm: noiseNorm, level: 0.01 });
  const background = problem.background();
  return { reconstruction, change: reconstruction.x.map((x, i) => x - background[i]), spectrum: prepared.spectrum ?? new Float64Array(0) };
}

const library = 'Values of the 12 x 12 example computed with numpy 1.24.2 and scipy 1.10.1.';
const line = '12 × 12 Gaussian kernel, 1 % noise';

interface SolutionSpec {
  readonly key: string;
  readonly name: string;
  readonly line: string;
  readonly values: readonly number[];
  readonly method: string;
  readonly parameters: Record<string, number | string>;
  readonly rule: RuleSetting;
  readonly bound: number;
  readonly reason: string;
  readonly source: Source;
}
function solution(spec: SolutionSpec): VerificationCheck {
  const at = largestEntry(spec.values);
  return {
    key: spec.key, group: 'Methods', name: spec.name, line: `${spec.line}, ${line}; largest of 12 values, the gap is over all`, published: spec.values[at].toFixed(8), unit: '',
    bound: spec.bound, reason: spec.reason, source: spec.source, cost: 'light',
    run() {
      const { change } = reconstruct(spec.method, spec.rule, spec.parameters);
      return { measured: change[at], gap: euclideanGap(change, spec.values), digest: digestOf(change) };
    },
  };
}

interface ChoiceSpec {
  readonly key: string;
  readonly name: string;
  readonly published: string;
  readonly value: number;
  readonly rule: RuleSetting;
  readonly bound: number;
  readonly reason: string;
  readonly source: Source;
}
/** The rule's alpha. The methods count it in units of sigma_1. */
function choice(spec: ChoiceSpec): VerificationCheck {
  return {
    key: spec.key, group: 'Methods', name: spec.name, line: `alpha chosen for Tikhonov, ${line}`, published: spec.published, unit: '', bound: spec.bound, reason: spec.reason, source: spec.source, cost: 'light',
    run() {
      const { reconstruction, change, spectrum } = reconstruct('tikhonov', spec.rule, { penalty: 'identity' });
      const measured = (reconstruction.parameter ?? NaN) * spectrum[0];
      return { measured, gap: relativeGap(measured, spec.value), digest: digestOf(measured, change) };
    },
  };
}

const gcv: Source = { short: 'Golub, Heath, Wahba 1979', full: `G. H. Golub, M. Heath, G. Wahba, Generalized cross-validation as a method for choosing a good ridge parameter, Technometrics 21 (1979) 215-223. ${library}`, fromMemory: true };
const svdSource: Source = { short: 'numpy 1.24.2', full: `${library} Definition: P. C. Hansen, Rank-Deficient and Discrete Ill-Posed Problems, SIAM, 1998.`, fromMemory: true };

const spectrumCheck: VerificationCheck = {
  key: 'singular-values-library', group: 'Methods', name: 'Singular values, ill-conditioned', line: 'largest of 12, condition 72,500; the gap is over all', published: singularValues[0].toFixed(12), unit: '', bound: 1e-13,
  reason: 'Two backward-stable codes differ by a modest multiple of the rounding unit times the largest singular value (Weyl).',
  source: { short: 'numpy 1.24.2', full: library }, cost: 'light',
  run() {
    const { spectrum } = reconstruct('tikhonov', { key: 'fixed', value: 0.1 }, { penalty: 'identity' });
    return { measured: spectrum[0], gap: largestGap(spectrum, singularValues), digest: digestOf(spectrum) };
  },
};

const truncatedGcv: VerificationCheck = {
  key: 'truncated-svd-gcv', group: 'Methods', name: 'Truncated SVD, cross-validation', line: `index chosen among k ≤ m/2, ${line}`, published: '6', unit: '', bound: 0,
  reason: 'A count.', source: gcv, cost: 'light',
  run() {
    const { reconstruction, change } = reconstruct('truncated-svd', { key: 'gcv' }, {});
    const measured = reconstruction.parameter ?? NaN;
    return { measured, gap: Math.abs(measured - 6), digest: digestOf(measured, change) };
  },
};

export const regularisationChecks: readonly VerificationCheck[] = [
  solution({
    key: 'tikhonov', name: 'Tikhonov', line: 'alpha = 0.1', values: solutions.tikhonov, method: 'tikhonov', parameters: { penalty: 'identity' }, rule: { key: 'fixed', value: 0.1 / singularValues[0] }, bound: 1e-8,
    reason: 'Rounding times the condition of the filtered problem, 1,600 in the normal equations.', source: { short: 'numpy 1.24.2', full: `${library} min |Ax - b|² + alpha² |x|² (Phillips 1962; Tikhonov 1963).`, fromMemory: true },
  }),
  solution({
    key: 'truncated-svd', name: 'Truncated SVD', line: 'k = 5', values: solutions.truncated, method: 'truncated-svd', parameters: {}, rule: { key: 'fixed', value: 5 }, bound: 1e-8,
    reason: 'Rounding times σ₁/σ₅ = 5.8; the published digits end at 1e-15.', source: svdSource,
  }),
  solution({
    key: 'cgls', name: 'Conjugate gradients (CGLS)', line: 'four steps', values: solutions.cgls, method: 'cgls', parameters: { penalty: 'identity' }, rule: { key: 'fixed', value: 4 }, bound: 1e-5,
    reason: 'Later iterates lose orthogonality: two codes of scipy (CGLS and LSQR) differ by 3e-6 among themselves.', source: { short: 'scipy 1.10.1', full: `${library} Björck, Numerical Methods for Least Squares Problems, SIAM, 1996, algorithm 7.4.1.`, fromMemory: true },
  }),
  truncatedGcv,
  choice({ key: 'gcv-alpha', name: 'Cross-validation', published: '0.1346157', value: 0.13461565898285566, rule: { key: 'gcv' }, bound: 1e-4, reason: 'A flat minimum: its place is known to the square root of the digits of the function.', source: gcv }),
  choice({
    key: 'discrepancy-alpha', name: 'Discrepancy principle', published: '0.2183026697', value: 0.21830266974259663, rule: { key: 'discrepancy', safetyFactor: 1 }, bound: 1e-8,
    reason: 'The root of a monotone equation, solved to rounding on both sides.', source: { short: 'Morozov 1966', full: `V. A. Morozov, On the solution of functional equations by the method of regularization, Soviet Math. Dokl. 7 (1966) 414-417. ${library}`, fromMemory: true },
  }),
  choice({
    key: 'l-curve-corner', name: 'L-curve corner', published: '0.0194568', value: 0.019456841703844274, rule: { key: 'l-curve' }, bound: 1e-3,
    reason: 'The corner of the reference was found on a grid.', source: { short: 'Hansen 1992', full: `P. C. Hansen, Analysis of discrete ill-posed problems by means of the L-curve, SIAM Rev. 34 (1992) 561-580. ${library}`, fromMemory: true },
  }),
  spectrumCheck,
];

