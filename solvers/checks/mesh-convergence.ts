import { simulateImpedanceData } from '../problems/electrical-impedance/data-simulation';
import { coarseFactor } from '../problems/electrical-impedance/simulation-mesh';
import { judge, type Check } from './check';
import type { ImpedanceCheckContext } from './phantom-check';

/** Up to this the result is a warning: the simulation is still better than the model of an inversion. */
const limit = 1e-3;

/**
 * The error of the simulated frame, estimated from a second, coarser simulation. Finite elements: edges 1.6 times as long; at order p
 * the error is the difference over 1.6^p - 1. p is taken as 2, the safe side: order 4 is observed for electrode voltages where the grading
 * rules the error, less where a varying truth does. Boundary integrals: 8 Gauss points a panel rather than 12 and a coarser grading; they
 * converge faster than any order, so the difference is practically the error of the coarser one and is taken as it is.
 */
export const meshConvergenceCheck: Check<ImpedanceCheckContext> = {
  key: 'mesh-convergence',
  name: 'Convergence of the simulation',
  unit: '',
  bound: 1e-4,
  comparison: 'at-most',
  formula: '\\|y_h - y_{1.6 h}\\|_\\infty \\,/\\, ((1.6^2 - 1) \\|y_h\\|_\\infty) \\quad \\text{or} \\quad \\|y_{12} - y_8\\|_\\infty \\,/\\, \\|y_{12}\\|_\\infty',
  summary:
    'Estimated discretisation error of the simulated voltages, from a second simulation. Finite elements: on a coarser mesh, with the order taken as 2. Boundary integrals: with 8 rather than 12 points a panel, the whole difference. Above the bound and up to 0.001 it is a warning.',
  source: {
    short: 'Richardson 1911',
    full: 'L. F. Richardson, The approximate arithmetical solution by finite differences of physical problems involving differential equations, Phil. Trans. R. Soc. A 210 (1911) 307-357.',
    fromMemory: true,
  },
  evaluate({ definition, truth, frame }) {
    const { data: coarse, simulator } = simulateImpedanceData(truth, definition.geometry, { level: 'coarse' });
    let difference = 0;
    let largest = 0;
    for (let i = 0; i < frame.length; i++) {
      difference = Math.max(difference, Math.abs(frame[i] - coarse[i]));
      largest = Math.max(largest, Math.abs(frame[i]));
    }
    const byPanels = simulator === 'boundary-integrals';
    const figure = difference / (byPanels ? 1 : coarseFactor * coarseFactor - 1) / largest;
    const how = byPanels ? 'from boundary integrals with fewer points a panel' : 'from a coarser mesh';
    const result = judge(this, figure, `Discretisation error of the simulated voltages, over the largest of them, estimated ${how}.`);
    return result.state === 'fail' && figure <= limit ? { ...result, state: 'warning' } : result;
  },
};
