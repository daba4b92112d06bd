import { defineMetric, undefinedMetric } from './metric-definition';

export const dataResidualRatio = defineMetric({
  key: 'data-residual-ratio',
  name: 'Data residual over noise',
  short: 'Residual',
  unit: '',
  better: 'one',
  formula: '\\rho = \\frac{\\|y^\\delta - F(\\hat x)\\|}{\\|e\\|}',
  summary: 'How far the reconstruction is from explaining the data, in multiples of the noise drawn. Near 1 fits the noise level; far below fits the noise itself; far above leaves signal unexplained.',
  sources: [{ short: 'Morozov 1966', full: 'V. A. Morozov: On the solution of functional equations by the method of regularization. Soviet Mathematics Doklady 7 (1966) 414-417.', fromMemory: true }],
  traps: [
    'For methods that linearise, F is the linearised model; for nonlinear ones the full model. The two cannot be compared where the contrast is high.',
    'Below the model-error floor no method reaches 1: the model itself is further from the data than the noise.',
    'A method that stops at the discrepancy lands near its safety factor by construction.',
  ],
  fromSummary: ({ input }) => {
    if (input.residualNorm === null) return undefinedMetric('The reconstruction came without its residual.');
    if (!(input.noiseNorm > 0)) return undefinedMetric('The data have no noise.');
    return { value: input.residualNorm / input.noiseNorm };
  },
});
