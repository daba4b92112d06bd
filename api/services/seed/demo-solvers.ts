import type { Configuration } from '../../../shared/contracts/solvers';
import type { SolverPlan } from './demo-plan.ts';

const discrepancy = (safetyFactor = 1.05): Configuration['rule'] => ({ key: 'discrepancy', safetyFactor });
const tikhonov = (penalty: string, rule: Configuration['rule']): Configuration => ({ method: 'tikhonov', parameters: { penalty, smallestAlpha: 1e-5 }, rule });
const holm = { group: 'holm-reference-methods', developer: 'developer-demo' } as const;
const quarry = { group: 'quarry-point-geophysics', developer: 'developer-demo' } as const;
const northlight = { group: 'northlight-process-imaging', developer: 'developer-demo' } as const;

export const solvers: readonly SolverPlan[] = [
  {
    ...holm, key: 'tikhonov-gradient', name: 'Tikhonov, gradient penalty',
    description: `One step from the background $x_b$ with the model linearised there, penalised by the size of the gradient:

$$ \\hat x = x_b + (J^{\\mathsf T} J + \\alpha^2 L^{\\mathsf T} L)^{-1} J^{\\mathsf T} (y - F(x_b)). $$

$\\alpha$ comes from the discrepancy principle at each frame: the residual is brought to $1.05$ times the norm of the noise (Morozov 1966).`,
    configuration: tikhonov('gradient', discrepancy(1.5)),
    versions: [{ configuration: tikhonov('gradient', discrepancy()), whatChanged: 'Safety factor 1.05 instead of 1.5' }],
  },
  {
    ...holm, key: 'tikhonov-identity', name: 'Tikhonov, identity penalty',
    description: `The same step with $L = I$, and $\\alpha$ by generalised cross-validation (Golub, Heath, Wahba 1979). The rule is not told the noise.`,
    configuration: tikhonov('identity', { key: 'gcv' }),
  },
  {
    ...holm, key: 'tikhonov-laplacian', name: 'Tikhonov, Laplacian penalty',
    description: `The same step, penalised by the Laplacian, with $\\alpha$ at the corner of the L-curve (Hansen 1992).`,
    configuration: tikhonov('laplacian', { key: 'l-curve' }),
  },
  {
    ...holm, key: 'truncated-svd', name: 'Truncated SVD, cross-validated',
    description: `Keeps the $k$ best determined components, with $k$ by generalised cross-validation:

$$ \\hat x = x_b + \\sum_{i=1}^{k} \\frac{u_i^{\\mathsf T} (y - F(x_b))}{\\sigma_i}\\, v_i. $$`,
    configuration: { method: 'truncated-svd', parameters: { largestIndex: 80 }, rule: { key: 'gcv' } },
  },
  {
    ...quarry, key: 'cgls', name: 'CGLS, early stopping',
    description: `Conjugate gradients on the normal equations, stopped when the residual reaches the norm of the noise. The number of steps is the regularisation.`,
    configuration: { method: 'cgls', parameters: { penalty: 'identity', largestIteration: 60 }, rule: discrepancy() },
  },
  {
    ...holm, key: 'cgls-gradient', name: 'CGLS in the gradient norm',
    description: `Conjugate gradients in the inner product of the gradient: each step is as smooth as the data allow. Stopped when the residual reaches the norm of the noise, or after 40 steps.`,
    configuration: { method: 'cgls', parameters: { penalty: 'gradient', largestIteration: 40 }, rule: discrepancy() },
  },
  {
    ...northlight, key: 'total-variation', name: 'Total variation, primal-dual',
    description: `Flat regions with sharp edges on the linearised problem, by the primal-dual iteration of Chambolle and Pock (2011):

$$ \\min_h\\; \\tfrac12 \\lVert J h - (y - F(x_b)) \\rVert^2 + \\lambda \\sum_i \\ell_i\\, \\lvert [h]_i \\rvert. $$`,
    configuration: { method: 'total-variation', parameters: {}, rule: discrepancy() },
  },
  {
    ...northlight, key: 'wavelet-sparsity', name: 'Haar wavelets, few of them',
    description: `The change written in Haar wavelets with as few of them as fit the data (Daubechies, Defrise, De Mol 2004), by accelerated soft thresholding.`,
    configuration: { method: 'wavelet-sparsity', parameters: { wavelet: 'haar' }, rule: discrepancy() },
  },
  {
    ...northlight, key: 'bounded-tikhonov', name: 'Tikhonov, never negative',
    description: `Tikhonov regularisation with a gradient penalty among the images that are nowhere negative. For quantities that cannot be: brightness, mass, temperature above the ground.`,
    configuration: { method: 'box-constrained-tikhonov', parameters: { penalty: 'gradient', lowest: 0 }, rule: discrepancy() },
  },
  {
    ...holm, key: 'nu-method', name: 'Nu-method, early stopping',
    description: `A gradient iteration that is faster than Landweber's by a square root (Brakhage 1987), stopped when the residual reaches the norm of the noise.`,
    configuration: { method: 'nu-method', parameters: {}, rule: discrepancy() },
  },
  {
    ...holm, key: 'smoothness-prior', name: 'Gaussian prior, most probable image',
    description: `The most probable unknown under a Gaussian prior with a correlation length of a fifth of the radius and white noise of the stated level. Nothing is chosen: the prior is the regularisation.`,
    configuration: { method: 'smoothness-prior', parameters: {}, rule: null },
  },
  {
    ...holm, key: 'crank-nicolson', name: 'Gaussian prior, sampled',
    description: `The same prior, and a chain of 2000 steps through what the data leave possible (preconditioned Crank-Nicolson, Cotter and others 2013). The image is the mean of the chain; its spread gives the credible intervals.`,
    configuration: { method: 'crank-nicolson', parameters: { steps: 2000 }, rule: null },
  },
  {
    ...quarry, key: 'gauss-newton', name: 'Gauss-Newton, regularised',
    description: `The nonlinear problem, linearised anew at every step, with a penalty that decays geometrically (Bakushinskii 1992) and the discrepancy as its end.`,
    configuration: { method: 'gauss-newton', parameters: { penalty: 'gradient', firstAlpha: 0.3, decay: 0.25, largestIteration: 6 }, rule: discrepancy(1.1) },
  },
  {
    ...quarry, key: 'gauss-newton-total-variation', name: 'Gauss-Newton with total variation',
    description: `The nonlinear problem with a penalty on jumps: at every step the model is linearised anew and the total variation replaced by a quadratic form with the weights of the last image. At most eight steps.`,
    configuration: { method: 'gauss-newton-total-variation', parameters: { largestIteration: 8 }, rule: discrepancy(1.1) },
  },
  {
    ...quarry, key: 'gauss-newton-bare', name: 'Gauss-Newton, hardly regularised',
    description: `The same iteration as the regularised one, with a first weight of $10^{-6}\\,\\sigma_1$ that falls to a twentieth at every step: how little penalty does the problem bear?`,
    configuration: { method: 'gauss-newton', parameters: { penalty: 'gradient', firstAlpha: 1e-6, decay: 0.05, largestIteration: 12 }, rule: discrepancy(1) },
  },
  {
    ...holm, key: 'd-bar', name: 'D-bar, truncated transform',
    description: `The nonlinear Fourier transform of the conductivity from the map between voltages and currents, cut at a radius that the noise allows, and inverted by a d-bar equation at each point (Knudsen, Lassas, Mueller, Siltanen 2009). On discs only.`,
    configuration: { method: 'd-bar', parameters: {}, rule: discrepancy() },
  },
  {
    ...holm, key: 'calderon', name: "Calderón's linearisation",
    description: `The first-order form of the same: the map tested with growing exponentials gives the Fourier transform of the change, cut at a frequency that the noise allows (Calderón 1980). On discs only.`,
    configuration: { method: 'calderon', parameters: {}, rule: discrepancy() },
  },
  {
    ...holm, key: 'factorisation', name: 'Factorisation test',
    description: `For each point: could a dipole there have caused the change (Brühl and Hanke 2000)? The test says where something changed, not by how much, and it is meant for changes of one sign.`,
    configuration: { method: 'factorisation', parameters: {}, rule: null },
  },
  {
    ...holm, key: 'trained-linear', name: 'Linear, trained on small targets',
    description: `One matrix, fitted so that small simulated targets give round spots of one size wherever they are (Adler and others 2009). It costs one product a frame.`,
    configuration: { method: 'trained-linear', parameters: {}, rule: { key: 'fixed', value: 0.003 } },
  },
  {
    ...holm, key: 'filtered-back-projection', name: 'Filtered back-projection',
    description: `The inversion formula of the Radon transform with a Shepp-Logan window, its cut-off by the discrepancy. Views that are missing count as zero.`,
    configuration: { method: 'filtered-back-projection', parameters: {}, rule: discrepancy() },
  },
  {
    ...holm, key: 'back-projection', name: 'Back-projection, unfiltered',
    description: `Each datum spread evenly over what it depends on. The oldest answer, and the floor for all others: blurred, low, and hardly moved by noise.`,
    configuration: { method: 'back-projection', parameters: {}, rule: null },
  },
  {
    ...holm, key: 'sart', name: 'SART, never negative',
    description: `All rays of one view at a time (Andersen and Kak 1984), values below zero raised to zero after each. At most 20 sweeps.`,
    configuration: { method: 'sart', parameters: { constraint: 'nonnegative', largestIteration: 20 }, rule: discrepancy() },
  },
  {
    ...holm, key: 'sirt', name: 'SIRT, never negative',
    description: `All rays at once, weighted by their lengths (Gilbert 1972), values below zero raised to zero after each step. At most 120 steps.`,
    configuration: { method: 'sirt', parameters: { constraint: 'nonnegative', largestIteration: 120 }, rule: discrepancy() },
  },
];
